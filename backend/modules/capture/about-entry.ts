import type { Entry } from './entry.entity.ts';

/** The entry as the subject of an act. */
export const aboutEntry = (entry: Entry) => ({
  type: 'entry',
  id: entry.id,
  participantId: entry.participantId,
  siteId: entry.siteId,
});
