import type { ParticipantState } from '#schemas/vocabulary/states.ts';
import type { VisitState } from '#schemas/vocabulary/states.ts';
import type { PenState } from '#frontend/components/pen-mark.tsx';

/** How each state is drawn; the word is the state's own. */
export const participantMarks: Record<ParticipantState, PenState> = {
  screening: 'todo',
  consented: 'underway',
  allocated: 'underway',
  completed: 'settled',
  withdrawn: 'late',
};

/** The mark and the word of a visit; what is past its window asks for a decision. */
export function visitMark({ state, overdue }: { state: VisitState; overdue: boolean }): {
  state: PenState;
  word: string;
} {
  if (overdue) return { state: 'asks', word: 'overdue' };
  const marks: Record<VisitState, PenState> = {
    planned: 'todo',
    'under-way': 'underway',
    completed: 'settled',
    missed: 'late',
  };
  return { state: marks[state], word: state.replace('-', ' ') };
}
