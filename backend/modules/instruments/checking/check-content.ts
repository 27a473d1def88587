import type { FieldSchema, InstrumentProblem, InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { patternProblem } from './linear-regexp.ts';
import { unitProblem } from './check-unit.ts';

/** Judges what needs more than a schema: each unit against UCUM, each pattern against the linear engine. */
export function contentProblems(schema: InstrumentSchema): InstrumentProblem[] {
  const problems: InstrumentProblem[] = [];
  const refuse = (pointer: string, message: string | undefined) => {
    if (message !== undefined) problems.push({ pointer, message });
  };

  const visit = (node: FieldSchema, pointer: string): void => {
    if (node.unit !== undefined) refuse(`${pointer}/unit`, unitProblem(node.unit));
    if (node.pattern !== undefined) refuse(`${pointer}/pattern`, patternProblem(node.pattern));
    if (typeof node.derive === 'object') {
      for (const [name, input] of Object.entries(node.derive.inputs)) {
        if (typeof input === 'object')
          refuse(`${pointer}/derive/inputs/${name}/unit`, unitProblem(input.unit));
      }
    }
    for (const [place, child] of childSchemas(node)) visit(child, `${pointer}/${place}`);
  };

  visit(schema, '');
  return problems;
}

/** The schemas directly inside a schema, each with its relative pointer. */
function childSchemas(node: FieldSchema): [string, FieldSchema][] {
  const named = (['properties', '$defs', 'dependentSchemas'] as const).flatMap((keyword) =>
    Object.entries((node as InstrumentSchema)[keyword] ?? {}).map(([name, child]): [string, FieldSchema] => [
      `${keyword}/${name}`,
      child,
    ]),
  );
  const listed = (['allOf', 'anyOf', 'oneOf'] as const).flatMap((keyword) =>
    (node[keyword] ?? []).map((child, index): [string, FieldSchema] => [`${keyword}/${index}`, child]),
  );
  const single = (['items', 'not', 'if', 'then', 'else'] as const).flatMap(
    (keyword): [string, FieldSchema][] => (node[keyword] ? [[keyword, node[keyword]]] : []),
  );
  return [...named, ...listed, ...single];
}
