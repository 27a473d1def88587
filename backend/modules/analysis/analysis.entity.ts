import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { id, json, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import type { StudyPlan } from '#analysis/study/study-plan.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** A plan being written. */
export const PlanDraftSchema = defineEntity({
  name: 'PlanDraft',
  tableName: 'plan_draft',
  indexes: [{ properties: ['studyId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    name: p.string().length(120),
    content: json<StudyPlan>(),
    authorId: () => p.manyToOne(PersonSchema).mapToPk().fieldName('author_id'),
    revision: revision(),
  },
});
export type PlanDraft = InferEntity<typeof PlanDraftSchema>;
audited(PlanDraftSchema, { subject: 'plan-draft', chain: 'study', columns: { revision: 'skip' } });

/** A signed plan; immutable. Its signature lies with the signatures. */
export const PlanVersionSchema = defineEntity({
  name: 'PlanVersion',
  tableName: 'plan_version',
  uniques: [{ properties: ['draftId', 'version'] }],
  indexes: [{ properties: ['studyId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    draftId: () => p.manyToOne(PlanDraftSchema).mapToPk().fieldName('draft_id'),
    version: p.integer(),
    name: p.string().length(120),
    content: json<StudyPlan>(),
    hash: p.string().length(64),
    authorId: () => p.manyToOne(PersonSchema).mapToPk().fieldName('author_id'),
    signedAt: p.datetime(),
    /** The study's state when it was signed: anything later than `running` is said in the first line. */
    studyStateThen: p.string().length(20),
  },
});
export type PlanVersion = InferEntity<typeof PlanVersionSchema>;
audited(PlanVersionSchema, { subject: 'plan-version', chain: 'study', columns: { content: 'skip' } });

/** A frozen snapshot for analysis; immutable, its bytes in the object store (LK-05). */
export const CutSchema = defineEntity({
  name: 'Cut',
  tableName: 'cut',
  uniques: [{ properties: ['studyId', 'number'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    number: p.integer(),
    kind: p.enum(['rehearsal', 'final'] as const),
    studyStateThen: p.string().length(20),
    objectKey: p.string().length(80),
    sha256: p.string().length(64),
    manifest: json<Record<string, unknown>>(),
    madeById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('made_by_id'),
    madeAt: p.datetime(),
  },
});
export type Cut = InferEntity<typeof CutSchema>;
audited(CutSchema, { subject: 'cut', chain: 'study', columns: { objectKey: 'skip', manifest: 'skip' } });

/** A plan carried out on a cut: never deleted, its result stored with the hash of its bytes (SR-02). */
export const RunSchema = defineEntity({
  name: 'Run',
  tableName: 'run',
  uniques: [{ properties: ['studyId', 'number'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    number: p.integer(),
    planVersionId: () => p.manyToOne(PlanVersionSchema).mapToPk().fieldName('plan_version_id').nullable(),
    /** Set instead of a version when a draft is rehearsed. */
    planDraftId: () => p.manyToOne(PlanDraftSchema).mapToPk().fieldName('plan_draft_id').nullable(),
    planHash: p.string().length(64),
    cutId: () => p.manyToOne(CutSchema).mapToPk().fieldName('cut_id'),
    engineVersion: p.string().length(40),
    seed: p.integer(),
    requestedById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('requested_by_id'),
    requestedAt: p.datetime(),
    state: p.enum(['waiting', 'running', 'done', 'failed', 'cancelled'] as const).default('waiting'),
    resultKey: p.string().length(80).nullable(),
    resultSha256: p.string().length(64).nullable(),
    failure: p.text().nullable(),
    revision: revision(),
  },
});
export type Run = InferEntity<typeof RunSchema>;
audited(RunSchema, { subject: 'run', chain: 'study', columns: { resultKey: 'skip', revision: 'skip' } });
