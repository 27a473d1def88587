/** States are named strings, one list a noun; the client draws each as a pen mark and this word. */
export const studyStates = ['setting-up', 'running', 'locked', 'unblinded'] as const;
export type StudyState = (typeof studyStates)[number];

export const participantStates = ['screening', 'consented', 'allocated', 'completed', 'withdrawn'] as const;
export type ParticipantState = (typeof participantStates)[number];

export const visitStates = ['planned', 'under-way', 'completed', 'missed'] as const;
export type VisitState = (typeof visitStates)[number];

export const entryStates = ['open', 'complete', 'void'] as const;
export type EntryState = (typeof entryStates)[number];

export const queryStates = ['asked', 'replied', 'settled'] as const;
export type QueryState = (typeof queryStates)[number];

export const exportStates = [
  'requested',
  'approved',
  'refused',
  'building',
  'ready',
  'downloaded',
  'failed',
] as const;
export type ExportState = (typeof exportStates)[number];

export const jobStates = ['waiting', 'running', 'done', 'failed', 'cancelled'] as const;
export type JobState = (typeof jobStates)[number];

/** How much a value reveals: `open` to all who may read the entry, `unblinding` only to unblinded members. */
export const levels = ['open', 'unblinding'] as const;
export type Level = (typeof levels)[number];
