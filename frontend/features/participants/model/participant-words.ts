import type { ParticipantState } from '#schemas/vocabulary/states.ts';
import type { PenState } from '#frontend/components/pen-mark.tsx';

/** How each state is drawn; the word is the state's own. */
export const participantMarks: Record<ParticipantState, PenState> = {
  screening: 'todo',
  consented: 'underway',
  allocated: 'underway',
  completed: 'settled',
  withdrawn: 'late',
};
