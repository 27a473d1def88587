import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { id, json } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** What a signature covers: content hashes at the moment of signing. */
export interface SignedContent {
  covered: { type: string; id: string; revision: number; hash: string; label: string }[];
  /** True when unblinding values were not shown to the signer, who signs that sentence too. */
  withoutUnblindingValues: boolean;
}

/** A signature: name, time, meaning, bound to content; append-only (ES-01, ES-02). */
export const SignatureSchema = defineEntity({
  name: 'Signature',
  tableName: 'signature',
  indexes: [{ properties: ['studyId', 'subjectType', 'subjectId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    subjectType: p.string().length(40),
    subjectId: p.uuid(),
    meaning: p.text(),
    signerId: () => p.manyToOne(PersonSchema).mapToPk().fieldName('signer_id'),
    /** The printed name as it was then. */
    signerName: p.string().length(120),
    role: p.string().length(40),
    signedAt: p.datetime(),
    content: json<SignedContent>(),
    contentHash: p.string().length(64),
  },
});
export type Signature = InferEntity<typeof SignatureSchema>;
audited(SignatureSchema, { subject: 'signature', chain: 'study', columns: { content: 'skip' } });

/** The study locked or unlocked, with what was open then (LK-02); append-only. */
export const StudyLockSchema = defineEntity({
  name: 'StudyLock',
  tableName: 'study_lock',
  indexes: [{ properties: ['studyId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    kind: p.enum(['lock', 'unlock'] as const),
    byId: () => p.manyToOne(PersonSchema).mapToPk().fieldName('by_id'),
    at: p.datetime(),
    reason: p.text(),
    openPoints: json<{ kind: string; count: number; override: string | null }[]>(),
  },
});
export type StudyLock = InferEntity<typeof StudyLockSchema>;
audited(StudyLockSchema, { subject: 'study-lock', chain: 'study', columns: { reason: 'skip' } });
