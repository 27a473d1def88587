import type { Operation } from '#schemas/api/capture.ts';
import { parseAddress } from '#schemas/instruments/address.ts';
import { operationProblem } from '#schemas/instruments/check-operation.ts';
import { checkValues, type Finding } from '#schemas/instruments/check-values.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { deriveValues, withDerived, type DerivedValue } from '#schemas/instruments/derive-values.ts';
import type { EntryValue, EntryValues } from '#schemas/instruments/entry-values.ts';
import { isWrittenNumber, parseWrittenNumber } from '#schemas/instruments/written-number.ts';
import type { QuantityLibrary } from '#schemas/instruments/quantity-library.ts';
import type { FieldProblem } from '#backend/http/problem.ts';

/** A change that is to be stored: the value at an address, null when it is taken away. */
export interface Change {
  address: string;
  value: EntryValue | null;
  written: string | null;
}

/** A value that a check turned away, or let pass with a reason. */
export interface Judged {
  change: Change;
  finding: Finding;
  /** Given for a soft check that was confirmed. */
  reason: string | null;
}

export interface SavePlan {
  stored: Change[];
  refused: Judged[];
  confirmed: Judged[];
  /** Everything computed from the values after the save. */
  derived: Record<string, DerivedValue>;
  /** What is entered after the save. */
  entered: EntryValues;
}

export interface SaveRequest {
  operations: readonly Operation[];
  confirmations: ReadonlyMap<string, string>;
  stage: 'open' | 'complete';
}

/** Says of one value at one address why the schema does not take it; empty when it does. */
export type FieldJudge = (address: string, value: EntryValue) => string[];

/** Turns operations into changes; what no field can hold is named, and then nothing of the request is stored. */
export function readOperations(
  compiled: CompiledInstrument,
  operations: readonly Operation[],
  judge: FieldJudge,
): { changes: Change[]; problems: FieldProblem[] } {
  const problems: FieldProblem[] = [];
  const changes: Change[] = [];
  const seen = new Set<string>();
  operations.forEach((operation, index) => {
    const at = `/operations/${index}`;
    const change = readOperation(compiled, operation, judge);
    if ('detail' in change) problems.push({ pointer: at + change.pointer, detail: change.detail });
    else if (seen.has(change.address))
      problems.push({ pointer: at, detail: `${change.address} is given twice` });
    else changes.push(change);
    if ('address' in change) seen.add(change.address);
  });
  return { changes, problems };
}

function readOperation(
  compiled: CompiledInstrument,
  operation: Operation,
  judge: FieldJudge,
): Change | FieldProblem {
  const { pointer, value = null, missing, rejected, written } = operation;
  const address = rejected === undefined ? pointer : `${pointer}!rejected`;
  const next: EntryValue | null =
    missing === undefined ? (rejected === undefined ? value : rejected) : { missing };
  const where = missing !== undefined ? '/missing' : rejected !== undefined ? '/rejected' : '/value';
  const problem = operationProblem(compiled, address, next);
  if (problem !== undefined) return { pointer: where, detail: problem };
  if (next === null || missing !== undefined || rejected !== undefined)
    return { address, value: next, written: null };
  const unlikeWritten = writtenProblem(next, written);
  if (unlikeWritten !== undefined) return { pointer: '/written', detail: unlikeWritten };
  const [first] = judge(address, next);
  if (first !== undefined) return { pointer: where, detail: first };
  return { address, value: next, written: written ?? null };
}

/** The digits as written must be the value: the record would otherwise hold two numbers. */
function writtenProblem(value: EntryValue, written: string | undefined): string | undefined {
  if (written === undefined) return undefined;
  if (typeof value !== 'number') return 'belongs to numbers only';
  const read = parseWrittenNumber(written);
  if (!isWrittenNumber(read)) return read.message;
  return read.value === value ? undefined : `reads ${read.value}, the value is ${value}`;
}

/**
 * Decides what of a request is stored. A hard check refuses the values it touches, by themselves; a soft one
 * asks, unless it came with a reason. What is refused is taken back and all is judged again, so that the
 * others are kept or refused on what will really lie there.
 */
export function planSave(
  compiled: CompiledInstrument,
  library: QuantityLibrary,
  before: EntryValues,
  changes: readonly Change[],
  request: Pick<SaveRequest, 'confirmations' | 'stage'>,
): SavePlan {
  const refused: Judged[] = [];
  let stored = [...changes];
  for (;;) {
    const entered = applied(before, stored);
    const derived = deriveValues(compiled, entered, library);
    const values = withDerived(entered, derived);
    const findings = checkValues(compiled, values, { stage: 'open' });
    const judged = judge(compiled, stored, findings, request.confirmations);
    if (judged.refused.length === 0)
      return { stored, refused, confirmed: judged.confirmed, derived, entered };
    refused.push(...judged.refused);
    const gone = new Set(judged.refused.map(({ change }) => change.address));
    stored = stored.filter(({ address }) => !gone.has(address));
  }
}

function judge(
  compiled: CompiledInstrument,
  changes: readonly Change[],
  findings: readonly Finding[],
  confirmations: ReadonlyMap<string, string>,
): { refused: Judged[]; confirmed: Judged[] } {
  const refused: Judged[] = [];
  const confirmed: Judged[] = [];
  for (const finding of findings) {
    const touched = changes.filter(
      ({ address, value }) => value !== null && reaches(compiled, finding, address),
    );
    const reason = finding.severity === 'soft' ? (confirmations.get(finding.checkId) ?? null) : null;
    for (const change of touched) (reason === null ? refused : confirmed).push({ change, finding, reason });
  }
  return { refused, confirmed };
}

/** Whether a change at an address can have caused a finding: directly, or through what is derived from it. */
function reaches(compiled: CompiledInstrument, finding: Finding, address: string): boolean {
  const pointer = parseAddress(address)?.pointer;
  if (pointer === undefined) return false;
  const sources = new Set(finding.pointers);
  for (const derivation of [...compiled.derivations].reverse()) {
    if (sources.has(derivation.pointer)) derivation.inputs.forEach((input) => sources.add(input));
  }
  return sources.has(pointer);
}

/** The values after some changes; nothing of the old ones is altered. */
export function applied(before: EntryValues, changes: readonly Change[]): EntryValues {
  const after = { ...before };
  for (const { address, value } of changes) {
    if (value === null) delete after[address];
    else after[address] = value;
  }
  return after;
}
