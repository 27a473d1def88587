import type { QueryDto, VerificationFieldDto } from '#schemas/api/monitoring.ts';
import type { PenState } from '../../../components/pen-mark.tsx';

interface Look {
  state: PenState;
  word: string;
}

/** How a field stands to its source: "verified", "verified at revision 4, changed since". */
export function fieldLook({ state, mark, openQueries }: VerificationFieldDto): Look {
  if (openQueries > 0 && state !== 'verified') {
    return { state: 'asks', word: openQueries === 1 ? 'asked' : `asked, ${openQueries} queries` };
  }
  if (state === 'verified') return { state: 'settled', word: 'verified' };
  if (state === 'open' || mark === null) return { state: 'todo', word: 'to verify' };
  const because = fallen[mark.because ?? ''] ?? 'mark fallen';
  return { state: 'late', word: `verified at revision ${mark.revision}, ${because}` };
}

/** Why a mark fell, by the server's word for it. */
const fallen: Record<string, string> = {
  'value-changed': 'changed since',
  'source-replaced': 'source replaced since',
  cleared: 'mark cleared',
  voided: 'entry voided since',
};

export const queryLooks: Record<QueryDto['state'], Look> = {
  asked: { state: 'asks', word: 'asked' },
  replied: { state: 'underway', word: 'replied' },
  settled: { state: 'settled', word: 'settled' },
};

/** The next field after `at` that still waits, from the top again at the end; -1 when none waits. */
export function nextWaiting(fields: readonly VerificationFieldDto[], at: number): number {
  const waits = ({ state }: VerificationFieldDto): boolean => state !== 'verified';
  const later = fields.findIndex((field, index) => index > at && waits(field));
  return later === -1 ? fields.findIndex((field, index) => index !== at && waits(field)) : later;
}

/** What a field or query is about: "Visit 2 · Systolic, reading 1". */
export const aboutQuery = ({ visitLabel, fieldLabel }: QueryDto): string =>
  [visitLabel, fieldLabel].filter((part) => part !== null).join(' · ') || 'the participant';
