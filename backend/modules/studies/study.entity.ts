import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { studyStates } from '#schemas/vocabulary/states.ts';
import { id, oneOf, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';

/** A study: its own chain, its own partition key, its own members. */
export const StudySchema = defineEntity({
  name: 'Study',
  tableName: 'study',
  properties: {
    id: id(),
    /** Lower case, in every address of the study: `/studies/screepath`. */
    code: p.string().length(40).unique(),
    name: p.string().length(80),
    title: p.string().length(300),
    state: oneOf(studyStates).default('setting-up'),
    plannedParticipants: p.integer().default(0),
    revision: revision(),
  },
});
export type Study = InferEntity<typeof StudySchema>;

audited(StudySchema, { subject: 'study', chain: 'self', columns: { revision: 'skip' } });
