import type { FindingDto, HiddenValue, Operation, ValueDto } from '#schemas/api/capture.ts';
import { checkValues } from '#schemas/instruments/check-values.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { deriveValues, withDerived } from '#schemas/instruments/derive-values.ts';
import type { EntryValue, EntryValues } from '#schemas/instruments/entry-values.ts';
import { isMissing } from '#schemas/instruments/entry-values.ts';
import { library } from './library.ts';

/** What is typed into the form at the drafting table, by address: tried, never stored. */
export type Trial = Readonly<Record<string, ValueDto>>;

/** The trial after one change of the form. */
export function withOperation(
  trial: Trial,
  { pointer, value, written, missing, rejected }: Operation,
): Trial {
  const address = rejected === undefined ? pointer : `${pointer}!rejected`;
  const { [address]: _before, ...rest } = trial;
  if (rejected !== undefined) return rejected === null ? rest : { ...rest, [address]: { value: rejected } };
  if (missing !== undefined) return { ...rest, [address]: { missing } };
  if (value === null || value === undefined) return rest;
  return { ...rest, [address]: { value, ...(written === undefined ? {} : { written }) } };
}

/** The trial as values of an entry, as samples keep them; only addresses that the instrument has. */
export function valuesOf(compiled: CompiledInstrument, trial: Trial): EntryValues {
  const values: EntryValues = {};
  for (const [address, { value, missing }] of Object.entries(trial)) {
    const pointer = address.replace(/(\/\d+)?(!rejected)?$/, '');
    if (compiled.field(pointer) === undefined && compiled.field(address) === undefined) continue;
    if (missing !== undefined) values[address] = { missing };
    else if (value !== undefined) values[address] = value;
  }
  return values;
}

/** Values of a sample, laid into the form. */
export const trialOf = (values: EntryValues): Trial =>
  Object.fromEntries(
    Object.entries(values).map(([address, value]): [string, ValueDto] => [address, asShown(value)]),
  );

const asShown = (value: EntryValue): ValueDto => (isMissing(value) ? { missing: value.missing } : { value });

/** What the form shows of a trial: what was typed, what is derived from it, and what the checks say. */
export function tried(
  compiled: CompiledInstrument,
  trial: Trial,
): { values: Record<string, ValueDto | HiddenValue>; findings: FindingDto[] } {
  const entered = valuesOf(compiled, trial);
  const derived = deriveValues(compiled, entered, library);
  const values: Record<string, ValueDto> = {};
  for (const address of Object.keys(entered)) values[address] = trial[address] ?? {};
  for (const [pointer, result] of Object.entries(derived)) {
    if (!('value' in result)) continue;
    const { value, unit, cautions, rule } = result;
    values[pointer] = {
      value,
      ...(unit === undefined ? {} : { unit }),
      rule: `${rule.id} ${rule.version}`,
      cautions,
    };
  }
  const findings = checkValues(compiled, withDerived(entered, derived), { stage: 'open' });
  return {
    values,
    findings: findings.map(({ checkId, severity, pointers, message }) => ({
      checkId,
      severity,
      pointers,
      message,
    })),
  };
}
