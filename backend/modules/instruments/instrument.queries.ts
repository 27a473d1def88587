import type { EntityManager } from '@mikro-orm/postgresql';
import type {
  DraftDto,
  InstrumentDto,
  LibraryInstrumentDto,
  VersionDto,
  VersionSummaryDto,
} from '#schemas/api/instruments.ts';
import { expandFields } from '#schemas/instruments/expand-fields.ts';
import { libraryInstruments } from '#schemas/instruments/library/index.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { assertReadable } from '#backend/http/authorize.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { draftTitle, isChanged } from './draft-text.ts';
import { baseOf } from './draft.service.ts';
import {
  InstrumentDraftSchema,
  InstrumentVersionSchema,
  type InstrumentDraft,
  type InstrumentVersion,
} from './instrument.entity.ts';

/** The instruments of the study by title: newest versions for everyone, drafts for those who may see them. */
export async function listInstruments(em: EntityManager): Promise<InstrumentDto[]> {
  const [versionsWhere, draftsWhere] = [
    accessible('read', 'InstrumentVersion'),
    accessible('read', 'InstrumentDraft'),
  ];
  const versions =
    versionsWhere === null ? [] : await findVersions(em, { ...versionsWhere, studyId: currentStudyId() });
  const newest = new Map(versions.map((version) => [version.key, version]));
  const drafts = draftsWhere === null ? [] : await em.find(InstrumentDraftSchema, draftsWhere);
  const onTable = new Map<string, { title: string; draft: NonNullable<InstrumentDto['draft']> }>();
  for (const draft of drafts) {
    const changed = isChanged(draft, await baseOf(em, draft));
    if (draft.baseVersion == null && !changed) continue; // discarded before it was ever published
    const { id, baseVersion = null, revision } = draft;
    onTable.set(draft.key, { title: draftTitle(draft), draft: { id, baseVersion, changed, revision } });
  }
  const names = await authorNames(em, [...newest.values()]);
  return [...new Set([...newest.keys(), ...onTable.keys()])]
    .map((key): InstrumentDto => {
      const version = newest.get(key);
      const lying = onTable.get(key);
      return {
        key,
        title: version?.title ?? lying?.title ?? key,
        newest: version === undefined ? null : presentSummary(version, names),
        draft: lying?.draft ?? null,
      };
    })
    .sort((a, b) => a.title.localeCompare(b.title, 'en'));
}

export const listLibrary = (): LibraryInstrumentDto[] =>
  libraryInstruments.map(({ key, title, schema }) => ({
    key,
    title,
    description: schema.description ?? null,
    fields: expandFields(schema).fields.length,
  }));

/** Versions of one instrument, newest first. */
export async function listVersions(em: EntityManager, key: string): Promise<VersionSummaryDto[]> {
  const where = accessible('read', 'InstrumentVersion');
  const versions = where === null ? [] : await findVersions(em, { ...where, key });
  const names = await authorNames(em, versions);
  return versions.toReversed().map((version) => presentSummary(version, names));
}

/** One version whole, with its schema as it was published. */
export async function readVersion(em: EntityManager, versionId: string): Promise<VersionDto> {
  const version = await findVersion(em, versionId);
  const newer = await em.count(InstrumentVersionSchema, {
    studyId: version.studyId,
    key: version.key,
    version: { $gt: version.version },
  });
  return {
    ...presentSummary(version, await authorNames(em, [version])),
    schema: version.schema,
    samples: version.samples,
    newest: newer === 0,
  };
}

export async function findVersion(em: EntityManager, versionId: string): Promise<InstrumentVersion> {
  const version = await em.findOne(InstrumentVersionSchema, versionId);
  assertReadable('InstrumentVersion', version, 'This version');
  return version as InstrumentVersion;
}

export async function presentDraft(em: EntityManager, draft: InstrumentDraft): Promise<DraftDto> {
  const { id, key, text, samples, baseVersion = null, revision } = draft;
  const changed = isChanged(draft, await baseOf(em, draft));
  return { id, key, title: draftTitle(draft), text, samples, baseVersion, changed, revision };
}

/** Oldest first, so that a map by key keeps the newest. */
const findVersions = (em: EntityManager, where: object): Promise<InstrumentVersion[]> =>
  em.find(InstrumentVersionSchema, where, { orderBy: { key: 'asc', version: 'asc' } });

async function authorNames(
  em: EntityManager,
  versions: readonly InstrumentVersion[],
): Promise<Map<string, string>> {
  const people = await em.find(PersonSchema, { id: { $in: versions.map(({ authorId }) => authorId) } });
  return new Map(people.map(({ id, name }) => [id, name]));
}

const presentSummary = (
  version: InstrumentVersion,
  names: ReadonlyMap<string, string>,
): VersionSummaryDto => ({
  id: version.id,
  key: version.key,
  version: version.version,
  title: version.title,
  hash: version.hash,
  reason: version.reason,
  authorName: names.get(version.authorId) ?? '',
  publishedAt: version.publishedAt.toISOString(),
});
