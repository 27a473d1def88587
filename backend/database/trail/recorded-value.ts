import { randomUUID } from 'node:crypto';
import type { Level } from '#schemas/vocabulary/states.ts';
import { commitmentOf, newSalt } from './commitment.ts';

/** What the value came from, when it was computed: rule, its version, the inputs' recorded values. */
export interface Derivation {
  rule: string;
  version: string;
  inputs: string[];
  cautions: string[];
}

/** A value as it lies in `recorded_value`: once, with its salt. */
export interface RecordedValue {
  id: string;
  subjectType: string;
  subjectId: string;
  address: string;
  level: Level;
  salt: Buffer;
  value: unknown;
  /** As it was typed, where that says more than the value: `118.50`. */
  written: string | null;
  derivation: Derivation | null;
  commitment: string;
}

/** Makes the record of a value; `recordChange` puts it into the act. */
export function recordedValue(
  what: Pick<RecordedValue, 'subjectType' | 'subjectId' | 'address' | 'value'> &
    Partial<Pick<RecordedValue, 'level' | 'written' | 'derivation'>>,
): RecordedValue {
  const salt = newSalt();
  const written = what.written ?? null;
  return {
    id: randomUUID(),
    subjectType: what.subjectType,
    subjectId: what.subjectId,
    address: what.address,
    level: what.level ?? 'open',
    salt,
    value: what.value,
    written,
    derivation: what.derivation ?? null,
    commitment: commitmentOf(salt, what.value, written),
  };
}
