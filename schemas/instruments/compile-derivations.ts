import type { ExpressionCompiler } from '../expressions/expression.ts';
import type { ExpressionType } from '../expressions/expression-types.ts';
import { sameUnit } from '../vocabulary/units.ts';
import { nearestWord } from '../expressions/nearest-word.ts';
import type { CompiledDerivation, CompiledField } from './compiled-instrument.ts';
import type { FoundField } from './expand-fields.ts';
import type { InstrumentProblem, QuantityInput } from './instrument.ts';
import type { LibraryQuantity, QuantityInputDefinition, QuantityLibrary } from './quantity-library.ts';

type Fields = Map<string, CompiledField>;

const expectedTypes: Record<Exclude<CompiledField['type'], 'choices'>, ExpressionType> = {
  number: 'double',
  integer: 'int',
  string: 'string',
  boolean: 'bool',
};

/** Compiles the derived fields in an order in which each finds its inputs; refuses unknown fields, units and circles. */
export function compileDerivations(
  found: FoundField[],
  fields: Fields,
  compiler: ExpressionCompiler,
  library: QuantityLibrary,
): { derivations: CompiledDerivation[]; problems: InstrumentProblem[] } {
  const problems: InstrumentProblem[] = [];
  const derivations = new Map<string, CompiledDerivation>();
  for (const { schema, pointer, schemaPointer } of found) {
    const field = fields.get(pointer);
    if (schema.derive === undefined || !field || field.type === 'choices') continue;
    const place = `${schemaPointer}/derive`;
    if (typeof schema.derive === 'string') {
      const expression = compiler.compile(schema.derive, expectedTypes[field.type]);
      if ('problems' in expression) {
        problems.push(
          ...expression.problems.map(({ message, start, end }) => ({
            pointer: place,
            message,
            range: { start, end },
          })),
        );
        continue;
      }
      const inputs = expression.dependencies.map(pointerOf);
      derivations.set(pointer, {
        pointer,
        inputs,
        optional: [],
        rule: { kind: 'expression', expression },
        level: 'open',
      });
      continue;
    }
    const { quantity, inputs } = schema.derive;
    const known = library.get(quantity);
    if (!known) {
      problems.push({ pointer: `${place}/quantity`, message: `The library has no quantity ${quantity}` });
      continue;
    }
    problems.push(...quantityProblems(known, inputs, field, fields, place));
    derivations.set(pointer, {
      pointer,
      inputs: Object.values(inputs).filter((input) => typeof input === 'string'),
      optional: known.inputs.flatMap(({ name, optional }) => {
        const input = inputs[name];
        return optional && typeof input === 'string' ? [input] : [];
      }),
      rule: { kind: 'quantity', quantity, version: known.version, inputs },
      level: 'open',
    });
  }
  if (problems.length > 0) return { derivations: [], problems };
  return inOrder(derivations, fields);
}

export function pointerOf(variable: string): string {
  return `/${variable.replaceAll('.', '/')}`;
}

function quantityProblems(
  known: LibraryQuantity,
  inputs: Record<string, QuantityInput>,
  field: CompiledField,
  fields: Fields,
  place: string,
): InstrumentProblem[] {
  const problems: InstrumentProblem[] = [];
  const names = known.inputs.map(({ name }) => name);
  if (!sameUnit(field.unit, known.unit)) {
    problems.push({
      pointer: place,
      message: `The quantity has the unit ${known.unit}, the field ${field.unit ?? 'none'}`,
    });
  }
  for (const name of Object.keys(inputs).filter((given) => !names.includes(given))) {
    const nearest = nearestWord(name, names) ?? names.join(', ');
    problems.push({
      pointer: `${place}/inputs/${name}`,
      message: `The quantity has no input ${name}; it has ${nearest}`,
    });
  }
  for (const needed of known.inputs) {
    const input = inputs[needed.name];
    const pointer = `${place}/inputs/${needed.name}`;
    if (input === undefined) {
      if (needed.optional) continue;
      problems.push({
        pointer: `${place}/inputs`,
        message: `The input ${needed.name} (${needed.unit}) is missing`,
      });
    } else if (typeof input !== 'string') {
      if (!takesUnit(needed, input.unit)) problems.push({ pointer, message: wrongUnit(needed, input.unit) });
    } else {
      const source = fields.get(input);
      if (!source) problems.push({ pointer, message: `There is no field ${input}` });
      else if (source.type !== 'number' && source.type !== 'integer')
        problems.push({ pointer, message: `${input} is no number` });
      else if (!takesUnit(needed, source.unit))
        problems.push({ pointer, message: wrongUnit(needed, source.unit) });
      else if (needed.array && !source.readings)
        problems.push({ pointer, message: `${needed.name} takes readings, ${input} is one value` });
    }
  }
  return problems;
}

function takesUnit({ unit, accepts }: QuantityInputDefinition, given: string | undefined): boolean {
  return sameUnit(unit, given) || (given !== undefined && (accepts?.(given) ?? false));
}

function wrongUnit(needed: { name: string; unit: string }, given: string | undefined): string {
  return `${needed.name} is taken in ${needed.unit}, this is in ${given ?? 'no unit'}: derive a field in ${needed.unit} first`;
}

/** Sorts so that inputs come first; what is left over goes round in a circle. */
function inOrder(
  derivations: Map<string, CompiledDerivation>,
  fields: Fields,
): { derivations: CompiledDerivation[]; problems: InstrumentProblem[] } {
  const ordered: CompiledDerivation[] = [];
  const waiting = new Map(derivations);
  let moved = true;
  while (moved) {
    moved = false;
    for (const [pointer, derivation] of waiting) {
      if (derivation.inputs.some((input) => waiting.has(input))) continue;
      ordered.push(derivation);
      waiting.delete(pointer);
      moved = true;
    }
  }
  const problems = [...waiting.keys()].map((pointer) => ({
    pointer: `${fields.get(pointer)?.schemaPointer ?? ''}/derive`,
    message: `${pointer} is computed from itself, through ${[...waiting.keys()].join(', ')}: break the circle`,
  }));
  return { derivations: ordered, problems };
}
