import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import type { InstrumentSchema, SampleEntry } from '#schemas/instruments/instrument.ts';
import { id, json, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** An instrument on the drafting table. */
export const InstrumentDraftSchema = defineEntity({
  name: 'InstrumentDraft',
  tableName: 'instrument_draft',
  uniques: [{ properties: ['studyId', 'key'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    key: p.string().length(60),
    /** The schema as its author wrote it, invalid text included, so that nothing typed is lost. */
    text: p.text(),
    samples: json<SampleEntry[]>(),
    baseVersion: p.integer().nullable(),
    revision: revision(),
  },
});
export type InstrumentDraft = InferEntity<typeof InstrumentDraftSchema>;
audited(InstrumentDraftSchema, {
  subject: 'instrument-draft',
  chain: 'study',
  columns: { text: 'digest', samples: 'digest', revision: 'skip' },
});

/** A published instrument: immutable, with the reason and the hash of its RFC 8785 form (IV-01). */
export const InstrumentVersionSchema = defineEntity({
  name: 'InstrumentVersion',
  tableName: 'instrument_version',
  uniques: [{ properties: ['studyId', 'key', 'version'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    key: p.string().length(60),
    version: p.integer(),
    title: p.string().length(200),
    /** `json`, not `jsonb`: the order of the fields is the order of the form. */
    schema: json<InstrumentSchema>().columnType('json'),
    samples: json<SampleEntry[]>().columnType('json'),
    /** SHA-256 of the RFC 8785 form of `schema`, hex; also the name under which the validator is served. */
    hash: p.string().length(64).index(),
    /** The standalone validator module, compiled on publication; read only to be served. */
    validatorCode: p.text().lazy(true, false),
    reason: p.text(),
    authorId: () => p.manyToOne(PersonSchema).mapToPk().fieldName('author_id'),
    publishedAt: p.datetime(),
  },
});
export type InstrumentVersion = InferEntity<typeof InstrumentVersionSchema>;
audited(InstrumentVersionSchema, {
  subject: 'instrument-version',
  chain: 'study',
  columns: { schema: 'skip', samples: 'skip', validatorCode: 'skip', reason: 'skip' },
});

/**
 * The validator of a schema that is only being drafted, kept for the preview by the schema's hash.
 * A cache, not a record: made again when asked for, swept when old.
 */
export const InstrumentPreviewSchema = defineEntity({
  name: 'InstrumentPreview',
  tableName: 'instrument_preview',
  properties: {
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id').primary(),
    hash: p.string().length(64).primary(),
    validatorCode: p.text(),
    madeAt: p.datetime(),
  },
});
