import type { ExpressionScope } from '../expressions/expression-types.ts';
import { sameUnit } from '../vocabulary/units.ts';
import type { CompiledDerivation, CompiledField, CompiledInstrument } from './compiled-instrument.ts';
import type { EntryValues } from './entry-values.ts';
import type { QuantityCaution, QuantityLibrary } from './quantity-library.ts';
import { readingsOf } from './readings.ts';
import { fieldNumber, fieldValue, putInScope } from './scope.ts';

/** The version of how expressions are evaluated here: kept with each value that an expression gave. */
const expressionRules = '1';

/** A derived value with all that is needed to compute it again, or why there is none. */
export type DerivedValue = {
  /** Pointers of the fields it was computed from. */
  inputs: string[];
  rule: { id: string; version: string };
} & (
  | { value: number | string | boolean; unit?: string; cautions: QuantityCaution[] }
  | { missing: 'input-missing' | 'no-result'; names: string[]; message: string }
);

/**
 * Computes every derived field from what was entered. The same code gives the preview in the browser and the record
 * on the server.
 *
 * @returns derived pointer → value, or the reason why there is none
 */
export function deriveValues(
  compiled: CompiledInstrument,
  values: EntryValues,
  library: QuantityLibrary,
): Record<string, DerivedValue> {
  const derived: Record<string, DerivedValue> = {};
  const known: EntryValues = withoutDerived(compiled, values);
  for (const derivation of compiled.derivations) {
    const field = compiled.field(derivation.pointer);
    if (!field) continue;
    const result = deriveOne(compiled, derivation, field, known, library);
    derived[derivation.pointer] = result;
    if ('value' in result) known[derivation.pointer] = result.value;
  }
  return derived;
}

/** What was entered together with what was derived from it. */
export function withDerived(values: EntryValues, derived: Record<string, DerivedValue>): EntryValues {
  const all = { ...values };
  for (const [pointer, result] of Object.entries(derived)) {
    if ('value' in result) all[pointer] = result.value;
    else delete all[pointer];
  }
  return all;
}

function withoutDerived(compiled: CompiledInstrument, values: EntryValues): EntryValues {
  return Object.fromEntries(Object.entries(values).filter(([address]) => !compiled.field(address)?.derived));
}

function deriveOne(
  compiled: CompiledInstrument,
  derivation: CompiledDerivation,
  field: CompiledField,
  known: EntryValues,
  library: QuantityLibrary,
): DerivedValue {
  const { inputs, rule } = derivation;
  const sources = inputs.flatMap((pointer) => compiled.field(pointer) ?? []);
  const kept = {
    inputs,
    rule:
      rule.kind === 'quantity'
        ? { id: rule.quantity, version: rule.version }
        : { id: `expression ${rule.expression.text}`, version: expressionRules },
  };
  const needed = sources.filter(({ pointer }) => !derivation.optional.includes(pointer));
  const absent = needed.filter((source) => fieldValue(compiled, source, known) === undefined);
  if (absent.length > 0) {
    const message = `Waits for ${absent.map(({ label }) => label).join(', ')}`;
    return { ...kept, missing: 'input-missing', names: absent.map(({ pointer }) => pointer), message };
  }
  const result =
    rule.kind === 'quantity'
      ? computeQuantity(compiled, rule, known, library)
      : computeExpression(compiled, rule, sources, known);
  if ('problem' in result) return { ...kept, missing: 'no-result', names: inputs, message: result.problem };
  const unit = field.unit === undefined ? {} : { unit: field.unit };
  const cautions = [...result.cautions, ...fewReadings(compiled, sources, known)];
  return { ...kept, value: result.value, ...unit, cautions };
}

type Computed = { value: number | string | boolean; cautions: QuantityCaution[] } | { problem: string };
type Rule<Kind> = Extract<CompiledDerivation['rule'], { kind: Kind }>;

function computeExpression(
  compiled: CompiledInstrument,
  { expression }: Rule<'expression'>,
  sources: CompiledField[],
  known: EntryValues,
): Computed {
  const scope: ExpressionScope = {};
  for (const source of sources) {
    const value = fieldValue(compiled, source, known);
    if (value !== undefined) putInScope(scope, source.variable, value);
  }
  const result = expression.evaluate(scope);
  return 'value' in result ? { value: result.value, cautions: [] } : result;
}

function computeQuantity(
  compiled: CompiledInstrument,
  { quantity, inputs }: Rule<'quantity'>,
  known: EntryValues,
  library: QuantityLibrary,
): Computed {
  const definition = library.get(quantity);
  if (!definition) return { problem: `The library has no quantity ${quantity}` };
  const given: Record<string, { value: number | number[]; unit: string }> = {};
  for (const { name, unit, array } of definition.inputs) {
    const input = inputs[name];
    if (input !== undefined && typeof input !== 'string') given[name] = input;
    const source = typeof input === 'string' ? compiled.field(input) : undefined;
    if (!source) continue;
    const value = array ? fieldValue(compiled, source, known) : fieldNumber(compiled, source, known);
    if (value !== undefined) given[name] = { value: value as number | number[], unit: source.unit ?? unit };
  }
  try {
    const { value, unit, cautions } = definition.compute(given);
    if (!sameUnit(unit, definition.unit))
      return { problem: `The result is in ${unit}, not in ${definition.unit}` };
    if (!Number.isFinite(value)) return { problem: 'The result is not a finite number' };
    return { value, cautions };
  } catch (error) {
    // A quantity refuses by throwing: no number may come out, and the reason is for the person at the screen.
    return { problem: refusal(error) };
  }
}

function refusal(error: unknown): string {
  if (!(error instanceof Error)) return String(error);
  return 'remedy' in error && typeof error.remedy === 'string'
    ? `${error.message} ${error.remedy}`
    : error.message;
}

/** A summary of fewer readings than the rule asks for is shown while they come in, and says so. */
function fewReadings(
  compiled: CompiledInstrument,
  sources: CompiledField[],
  known: EntryValues,
): QuantityCaution[] {
  return sources.flatMap((source) => {
    if (!source.readings) return [];
    const { counted } = readingsOf(compiled, source, known);
    if (counted.length >= source.readings.minimum) return [];
    const message = `${source.label}: ${counted.length} of at least ${source.readings.minimum} readings`;
    return [{ code: 'few-readings', message }];
  });
}
