import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { exportStates } from '#schemas/vocabulary/states.ts';
import { id, json, oneOf, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { RunSchema } from '../analysis/analysis.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** One export from request to its single download; the register of what left (DX-13, DX-14). */
export const ExportRequestSchema = defineEntity({
  name: 'ExportRequest',
  tableName: 'export_request',
  uniques: [{ properties: ['studyId', 'number'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    number: p.integer(),
    purpose: p.text(),
    runId: () => p.manyToOne(RunSchema).mapToPk().fieldName('run_id'),
    requestedById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('requested_by_id'),
    requestedAt: p.datetime(),
    state: oneOf(exportStates).default('requested'),
    /** The disclosure report in numbers, as it was read. */
    report: json<Record<string, unknown>>(),
    /** SHA-256 over report, run and cut: an approval is of exactly this (DX-13). */
    reportHash: p.string().length(64),
    decidedById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('decided_by_id').nullable(),
    decidedAt: p.datetime().nullable(),
    decisionReason: p.text().nullable(),
    objectKey: p.string().length(80).nullable(),
    sha256: p.string().length(64).nullable(),
    size: p.integer().nullable(),
    readyAt: p.datetime().nullable(),
    downloadedAt: p.datetime().nullable(),
    revision: revision(),
  },
});
export type ExportRequest = InferEntity<typeof ExportRequestSchema>;
audited(ExportRequestSchema, {
  subject: 'export-request',
  chain: 'study',
  columns: { report: 'skip', objectKey: 'skip', revision: 'skip' },
});
