import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { id, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { StudySchema } from './study.entity.ts';

/** Where visits happen; gives the prefix of participant codes and the zone of observed times. */
export const SiteSchema = defineEntity({
  name: 'Site',
  tableName: 'site',
  uniques: [{ properties: ['studyId', 'code'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    /** Two capital letters. */
    code: p.string().length(2),
    name: p.string().length(80),
    /** IANA zone, e.g. `America/La_Paz`. */
    timeZone: p.string().length(60),
    revision: revision(),
  },
});
export type Site = InferEntity<typeof SiteSchema>;

audited(SiteSchema, { subject: 'site', chain: 'study', columns: { revision: 'skip' } });
