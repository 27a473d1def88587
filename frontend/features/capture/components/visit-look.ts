import type { VisitDto } from '#schemas/api/capture.ts';
import type { PenState } from '../../../components/pen-mark.tsx';

/** A visit's state as pen mark and word. */
export function visitLook({ state, overdue, missedReason }: VisitDto): { state: PenState; word: string } {
  if (overdue) return { state: 'asks', word: 'overdue: decide' };
  if (state === 'missed') return { state: 'late', word: `missed: ${missedReason ?? ''}` };
  const looks = {
    planned: { state: 'todo', word: 'planned' },
    'under-way': { state: 'underway', word: 'under way' },
    completed: { state: 'settled', word: 'completed' },
  } as const;
  return looks[state];
}
