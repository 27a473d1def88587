import type { StudyState } from '#schemas/vocabulary/states.ts';
import type { PenState } from '#frontend/components/pen-mark.tsx';

/** How a study's state is drawn and said. */
export const studyMarks: Record<StudyState, { state: PenState; word: string }> = {
  'setting-up': { state: 'todo', word: 'being set up' },
  running: { state: 'underway', word: 'running' },
  locked: { state: 'settled', word: 'locked' },
  unblinded: { state: 'settled', word: 'unblinded' },
};

/** A study's code from its name: `Marsh 2` → `marsh-2`. */
export const codeFrom = (name: string): string =>
  name
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, '-')
    .replaceAll(/^[^a-z]+|-+$/g, '')
    .slice(0, 40);
