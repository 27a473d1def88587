import { expressionCompiler } from '../expressions/expression.ts';
import type { ExpressionType, ExpressionVariables } from '../expressions/expression-types.ts';
import { nearestWord } from '../expressions/nearest-word.ts';
import { cautionTexts } from '../vocabulary/caution-texts.ts';
import type { Level } from '../vocabulary/states.ts';
import { referenceProblem } from './bounds.ts';
import { compileChecks } from './compile-checks.ts';
import { compileDerivations } from './compile-derivations.ts';
import { compileField } from './compile-field.ts';
import type { CompiledField, CompiledInstrument } from './compiled-instrument.ts';
import { expandFields, type FoundFields } from './expand-fields.ts';
import type { InstrumentProblem, InstrumentSchema } from './instrument.ts';
import { instrumentLimits } from './limits.ts';
import { lintField } from './lint-instrument.ts';
import type { QuantityLibrary } from './quantity-library.ts';
import { spreadVisibility } from './spread-visibility.ts';

/**
 * Reads an instrument once for all that works with its values.
 * The schema must have passed `instrumentMetaSchema`; what one keyword asks of another is checked here.
 */
export function compileInstrument(
  schema: InstrumentSchema,
  library: QuantityLibrary,
): CompiledInstrument | { problems: InstrumentProblem[] } {
  const references = referenceProblem(schema);
  if (references) return { problems: [references] };
  const found = expandFields(schema);
  const { fields, problems } = compileFields(found, schema);
  problems.push(...structureProblems(schema, found, fields));
  if (problems.length > 0) return { problems };

  const variables = variablesOf(fields);
  const compiler = expressionCompiler(variables);
  const { derivations, problems: derivationProblems } = compileDerivations(
    found.fields,
    fields,
    compiler,
    library,
  );
  const { checks, problems: checkProblems } = compileChecks(schema.checks ?? [], fields, compiler);
  if (derivationProblems.length + checkProblems.length > 0)
    return { problems: [...derivationProblems, ...checkProblems] };

  const list = [...fields.values()];
  const comesFrom = new Map<string, string[]>();
  for (const field of list) {
    const derivation = derivations.find(({ pointer }) => pointer === field.pointer);
    const decided = found.decidedBy.get(field.pointer) ?? [];
    comesFrom.set(field.pointer, [
      ...(derivation?.inputs ?? []),
      ...decided,
      ...(field.readings?.partners ?? []),
    ]);
  }
  const visibility = spreadVisibility(list, comesFrom);
  const levelOf = (pointers: string[]): Level =>
    pointers.some((pointer) => visibility[pointer]?.unblinding) ? 'unblinding' : 'open';
  for (const field of list) {
    field.visibility = visibility[field.pointer] ?? field.visibility;
    field.level = levelOf([field.pointer]);
  }
  for (const derivation of derivations) derivation.level = levelOf([derivation.pointer]);
  for (const check of checks) check.level = levelOf(check.pointers);

  return {
    key: schema.instrumentKey,
    title: schema.title,
    schema,
    fields: list,
    field: (pointer) => fields.get(pointer),
    derivations,
    checks,
    visibility,
    cautions: schema.cautions ?? [],
    warnings: found.fields.flatMap(lintField),
    variables,
  };
}

/** Compiles a published version, which was checked when it was published. */
export function compilePublished(schema: InstrumentSchema, library: QuantityLibrary): CompiledInstrument {
  const compiled = compileInstrument(schema, library);
  if (!('problems' in compiled)) return compiled;
  const [first] = compiled.problems;
  throw new Error(
    `Instrument ${schema.instrumentKey} does not compile: ${first?.pointer ?? ''} ${first?.message ?? ''}`,
  );
}

function compileFields(found: FoundFields, schema: InstrumentSchema) {
  const problems: InstrumentProblem[] = [];
  const fields = new Map<string, CompiledField>();
  for (const one of found.fields) {
    const result = compileField(one, schema.unblinding ?? false);
    if ('problems' in result) problems.push(...result.problems);
    else fields.set(one.pointer, result.field);
  }
  for (const { readings, pointer } of fields.values()) {
    if (!readings) continue;
    const partners = [...fields.values()].filter(
      (other) => readings.together && other.readings?.together === readings.together,
    );
    readings.partners = partners.length > 0 ? partners.map((other) => other.pointer) : [pointer];
  }
  return { fields, problems };
}

function structureProblems(
  schema: InstrumentSchema,
  found: FoundFields,
  fields: Map<string, CompiledField>,
): InstrumentProblem[] {
  const problems: InstrumentProblem[] = [];
  if (schema.additionalProperties !== false && schema.unevaluatedProperties !== false) {
    problems.push({
      pointer: '',
      message: 'Write "additionalProperties": false, so that nothing unknown is taken',
    });
  }
  if (found.fields.length === 0)
    problems.push({ pointer: '/properties', message: 'The instrument has no fields' });
  if (found.fields.length > instrumentLimits.fields) {
    problems.push({
      pointer: '/properties',
      message: `At most ${instrumentLimits.fields} fields: divide the instrument`,
    });
  }
  for (const group of found.groups) {
    if (group.pointer.split('/').length > instrumentLimits.groupLevels + 1) {
      const message = `Groups lie at most ${instrumentLimits.groupLevels} deep in one another`;
      problems.push({ pointer: group.schemaPointer, message });
    }
    if (group.schema.additionalProperties !== false && group.schema.unevaluatedProperties !== false) {
      problems.push({
        pointer: group.schemaPointer,
        message: 'Write "additionalProperties": false in each group',
      });
    }
    if (!group.required && !group.conditional && (group.schema.required ?? []).length > 0) {
      problems.push({
        pointer: `${group.schemaPointer}/required`,
        message: 'The group is not required, so its fields cannot be: require the group as well',
      });
    }
  }
  problems.push(
    ...unknownRequired(schema, found),
    ...unknownInConditions(found),
    ...unknownCautions(schema),
    ...unequalPartners(fields),
  );
  return problems;
}

function unknownRequired(schema: InstrumentSchema, found: FoundFields): InstrumentProblem[] {
  const objects = [{ schema, pointer: '', schemaPointer: '' }, ...found.groups];
  const known = [...found.fields, ...found.groups].map(({ pointer }) => pointer);
  return objects.flatMap((object) =>
    (object.schema.required ?? []).flatMap((name, index) => {
      if (known.includes(`${object.pointer}/${name}`)) return [];
      const siblings = known
        .filter((pointer) => pointer.startsWith(`${object.pointer}/`))
        .map((pointer) => pointer.split('/').at(-1) ?? '');
      const nearest = nearestWord(name, siblings);
      const message = `There is no field ${name}` + (nearest ? `: did you mean ${nearest}?` : '');
      return [{ pointer: `${object.schemaPointer}/required/${index}`, message }];
    }),
  );
}

/** A condition on a field that is not there can never hold, or can never be met. */
function unknownInConditions({ fields, groups, decidedBy }: FoundFields): InstrumentProblem[] {
  const known = new Set([...fields, ...groups].map(({ pointer }) => pointer));
  const named = new Set([...decidedBy].flatMap(([pointer, causes]) => [pointer, ...causes]));
  return [...named]
    .filter((pointer) => !known.has(pointer))
    .map((pointer) => {
      return { pointer: '', message: `A condition names ${pointer}, which is no field` };
    });
}

function unknownCautions(schema: InstrumentSchema): InstrumentProblem[] {
  return (schema.cautions ?? []).flatMap((code, index) =>
    Object.hasOwn(cautionTexts, code)
      ? []
      : [
          {
            pointer: `/cautions/${index}`,
            message: `There is no caution ${code}; there are ${Object.keys(cautionTexts).join(', ')}`,
          },
        ],
  );
}

/** Readings taken in one act must be counted by one rule, or a reading would count here and not there. */
function unequalPartners(fields: Map<string, CompiledField>): InstrumentProblem[] {
  return [...fields.values()].flatMap((field) => {
    const first = fields.get(field.readings?.partners[0] ?? '')?.readings;
    const own = field.readings;
    if (!own || !first) return [];
    const rule = ({ count, discardFirst, use, replaceRejected, most }: typeof own) =>
      JSON.stringify([count, discardFirst, use, replaceRejected, most]);
    if (rule(own) === rule(first)) return [];
    const message = `Readings that are taken together (${own.together ?? ''}) need the same count, discardFirst, use, replaceRejected and maxItems`;
    return [{ pointer: `${field.schemaPointer}/readings`, message }];
  });
}

function variablesOf(fields: Map<string, CompiledField>): ExpressionVariables {
  const variables: ExpressionVariables = {};
  for (const field of fields.values()) {
    const path = field.variable.split('.');
    const leaf = path.pop() ?? '';
    let here = variables;
    for (const group of path) here = (here[group] ??= {}) as ExpressionVariables;
    here[leaf] = expressionType(field);
  }
  return variables;
}

function expressionType(field: CompiledField): ExpressionType {
  if (field.readings) return 'list<double>';
  if (field.type === 'choices') return 'list<string>';
  return { number: 'double', integer: 'int', string: 'string', boolean: 'bool' }[
    field.type
  ] as ExpressionType;
}
