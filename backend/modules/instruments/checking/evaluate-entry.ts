import { operationProblem } from '#schemas/instruments/check-operation.ts';
import { checkValues, type Finding } from '#schemas/instruments/check-values.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { deriveValues, withDerived, type DerivedValue } from '#schemas/instruments/derive-values.ts';
import type { EntryValues } from '#schemas/instruments/entry-values.ts';
import type { QuantityLibrary } from '#schemas/instruments/quantity-library.ts';
import type { InstanceValidator } from './instance-validator.ts';

/** What an entry's values amount to. */
export interface EntryEvaluation {
  derived: Record<string, DerivedValue>;
  findings: Finding[];
}

/**
 * Judges and derives an entry: kinds, limits, derived values, checks; on completion the whole document too.
 * An address that the instrument does not have, or a value of a wrong kind, is a finding and takes no further part.
 */
export function evaluateEntry(
  compiled: CompiledInstrument,
  validator: InstanceValidator,
  library: QuantityLibrary,
  values: EntryValues,
  stage: 'open' | 'complete',
): EntryEvaluation {
  const sound: EntryValues = {};
  const findings: Finding[] = [];
  for (const [address, value] of Object.entries(values)) {
    const message = operationProblem(compiled, address, value);
    if (message === undefined) sound[address] = value;
    else findings.push(addressFinding(compiled, address, message));
  }
  const derived = deriveValues(compiled, sound, library);
  const all = withDerived(sound, derived);
  const bySchema =
    stage === 'complete'
      ? validator.document(all)
      : Object.entries(all).flatMap(([address, value]) => validator.field(address, value));
  findings.push(...bySchema, ...checkValues(compiled, all, { stage }));
  return { derived, findings: withoutRepeats(findings) };
}

function addressFinding(compiled: CompiledInstrument, address: string, message: string): Finding {
  const field = compiled.field(address.replace(/\/\d+(!rejected)?$/, ''));
  const level = field?.level ?? 'open';
  return { checkId: 'schema', severity: 'hard', pointers: [address], message, level, opensQuery: false };
}

/** The schema and the instrument's own rules both miss a required field. */
function withoutRepeats(findings: Finding[]): Finding[] {
  const seen = new Map<string, Finding>();
  for (const finding of findings)
    seen.set(`${finding.checkId} ${finding.pointers.join(' ')} ${finding.message}`, finding);
  return [...seen.values()];
}
