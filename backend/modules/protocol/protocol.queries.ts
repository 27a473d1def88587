import type { EntityManager } from '@mikro-orm/postgresql';
import type {
  ProtocolDifferenceDto,
  ProtocolDraftDto,
  ProtocolVersionDto,
  ProtocolVersionSummaryDto,
  ShownProtocol,
} from '#schemas/api/protocol.ts';
import { protocolDifference } from '#schemas/protocol/protocol-difference.ts';
import type { Protocol } from '#schemas/protocol/protocol.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { currentActor } from '#backend/http/actor.ts';
import { assertReadable } from '#backend/http/authorize.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { newestInstruments } from '../instruments/index.ts';
import { isAmended, newestProtocol } from './protocol-draft.service.ts';
import { ProtocolVersionSchema, type ProtocolDraft, type ProtocolVersion } from './protocol.entity.ts';

/** Versions of the protocol, newest first. */
export async function listProtocolVersions(em: EntityManager): Promise<ProtocolVersionSummaryDto[]> {
  const where = accessible('read', 'ProtocolVersion');
  if (where === null) return [];
  const versions = await em.find(ProtocolVersionSchema, where, { orderBy: { version: 'desc' } });
  const people = await em.find(PersonSchema, { id: { $in: versions.map(({ authorId }) => authorId) } });
  const names = new Map(people.map(({ id, name }) => [id, name]));
  return versions.map((version) => presentSummary(version, names.get(version.authorId) ?? ''));
}

export async function presentProtocolVersion(
  em: EntityManager,
  version: ProtocolVersion,
): Promise<ProtocolVersionDto> {
  const { authorId, studyId, content } = version;
  const author = await em.findOne(PersonSchema, authorId);
  const newest = await newestProtocol(em, studyId);
  const used = instrumentsOf(content);
  const published = await newestInstruments(em, studyId);
  return {
    ...presentSummary(version, author?.name ?? ''),
    newest: newest?.id === version.id,
    content: shownProtocol(content),
    instruments: [...published.values()]
      .filter((instrument) => used.has(instrument.version.key))
      .map((instrument) => ({
        key: instrument.version.key,
        title: instrument.version.title,
        versionId: instrument.version.id,
      })),
  };
}

export async function findProtocolVersion(em: EntityManager, versionId: string): Promise<ProtocolVersion> {
  const version = await em.findOne(ProtocolVersionSchema, versionId);
  assertReadable('ProtocolVersion', version, 'This version');
  return version as ProtocolVersion;
}

export async function presentProtocolDraft(
  em: EntityManager,
  draft: ProtocolDraft,
): Promise<ProtocolDraftDto> {
  const { text, baseVersion = null, revision } = draft;
  return { text, baseVersion, changed: await isAmended(em, draft), revision };
}

/** What an amendment changes, as far as the reader may know the parts it touches. */
export const shownDifferences = (before: Protocol, after: Protocol): ProtocolDifferenceDto[] =>
  protocolDifference(before, after)
    .filter(({ path }) => knowsBlockSizes() || !path.join('/').startsWith('allocation/blockSizes'))
    .map(({ kind, sentence, visitType = null }) => ({ kind, sentence, visitType }));

/** Block sizes let people who enrol or assess guess the next assignment (RB-01). */
export function shownProtocol(content: Protocol): ShownProtocol {
  const { stratifyBySite, blockSizes } = content.allocation;
  return { ...content, allocation: { stratifyBySite, blockSizes: knowsBlockSizes() ? blockSizes : null } };
}

/** The protocol's author, and members who may know the allocation itself. */
const knowsBlockSizes = (): boolean => {
  const { ability, unblinded } = currentActor();
  return unblinded || ability.can('read', 'ProtocolDraft');
};

function instrumentsOf({ visitTypes, participantLogs }: Protocol): Set<string> {
  const steps = visitTypes.flatMap(({ runSheet }) => runSheet);
  return new Set([
    ...steps.flatMap(({ instrument }) => instrument ?? []),
    ...participantLogs.map((log) => log.instrument),
  ]);
}

const presentSummary = (
  { id, version, content, hash, reason, publishedAt }: ProtocolVersion,
  authorName: string,
): ProtocolVersionSummaryDto => ({
  id,
  version,
  title: content.title,
  hash,
  reason,
  authorName,
  publishedAt: publishedAt.toISOString(),
});
