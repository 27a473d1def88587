import type { ExportDto } from '#schemas/api/exports.ts';
import type { PenState } from '../../../components/pen-mark.tsx';

type Told = Pick<ExportDto, 'state' | 'expiresAt'>;

/** The time for downloading is over. */
export const isExpired = ({ state, expiresAt }: Told, now: number): boolean =>
  state === 'ready' && expiresAt !== null && Date.parse(expiresAt) <= now;

/** The state of an export as a mark and words. */
export function exportLook(row: Told, now = Date.now()): { state: PenState; word: string } {
  if (isExpired(row, now)) return { state: 'late', word: 'no longer kept; it was not downloaded in time' };
  return looks[row.state];
}

const looks: Record<ExportDto['state'], { state: PenState; word: string }> = {
  requested: { state: 'asks', word: 'waits for a decision' },
  approved: { state: 'underway', word: 'approved, being built' },
  refused: { state: 'late', word: 'refused' },
  building: { state: 'underway', word: 'being built' },
  ready: { state: 'asks', word: 'ready to download, once' },
  downloaded: { state: 'settled', word: 'downloaded' },
  failed: { state: 'asks', word: 'could not be built; ask for it again' },
};
