import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';

/** What is done to a field before it leaves. */
export type Treatment =
  /** Leaves as it is. */
  | { kind: 'keep' }
  /** A date becomes the study day. */
  | { kind: 'study-day' }
  /** Ages above 89 become 90 (DX-02). */
  | { kind: 'pool-age' }
  /** Stays out, with the reason. */
  | { kind: 'leave-out'; why: string };

/** Decides by what the instrument says of the field; in doubt it stays out. */
export function treatmentOf(field: CompiledField): Treatment {
  if (field.visibility.freeText) return { kind: 'leave-out', why: 'free text that nobody has reviewed' };
  if (field.format === 'date' || field.format === 'date-time') return { kind: 'study-day' };
  if (isAge(field)) return { kind: 'pool-age' };
  if (field.type === 'string' && field.choices === undefined && !isClockTime(field)) {
    return { kind: 'leave-out', why: 'text that is not from a list' };
  }
  return { kind: 'keep' };
}

const isAge = (field: CompiledField): boolean => field.unit === 'a' || /(^|\/)age/i.test(field.pointer);

/** Clock times of a visit are no element of a date. */
const isClockTime = (field: CompiledField): boolean => /clock time/i.test(field.description ?? '');

export const treatmentWords: Record<Exclude<Treatment['kind'], 'leave-out'>, string> = {
  keep: 'kept as entered',
  'study-day': 'dates become the study day; day 1 is the participant’s first visit',
  'pool-age': 'ages above 89 become 90',
};
