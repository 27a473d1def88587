import type { EntityManager } from '@mikro-orm/postgresql';
import type { ProtocolTextBody, StartProtocolDraftBody } from '#schemas/api/protocol.ts';
import { act } from '#backend/database/act.ts';
import { canonicalHash } from '#backend/database/trail/canonical.ts';
import { currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { Problem, stateForbids } from '#backend/http/problem.ts';
import { draftText } from '../instruments/index.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { blankProtocol } from './blank-protocol.ts';
import { judgeProtocol } from './judge-protocol.ts';
import {
  ProtocolDraftSchema,
  ProtocolVersionSchema,
  type ProtocolDraft,
  type ProtocolVersion,
} from './protocol.entity.ts';

const about = (kind: string, reason: string | null = null) => ({
  kind,
  reason,
  subject: ({ id }: ProtocolDraft) => ({ type: 'protocol-draft', id }),
});

/** Begins the protocol, or an amendment of its newest version; one draft a study. */
export const startProtocolDraft = (
  em: EntityManager,
  { from }: StartProtocolDraftBody,
): Promise<ProtocolDraft> =>
  act(em, about('protocol-drafted'), async (tx) => {
    await assertStudyOpen(tx);
    const studyId = currentStudyId();
    authorize('create', 'ProtocolDraft', { studyId });
    const base = await newestProtocol(tx, studyId);
    if (from === 'newest' && base === null)
      throw stateForbids('No version was published yet; begin a blank one.');
    const study = await tx.findOneOrFail(StudySchema, studyId);
    const text = draftText(from === 'newest' && base !== null ? base.content : blankProtocol(study.title));
    const lying = await tx.findOne(ProtocolDraftSchema, { studyId });
    if (lying === null)
      return tx.create(ProtocolDraftSchema, { studyId, text, baseVersion: base?.version ?? null });
    if (await isAmended(tx, lying)) {
      throw new Problem(
        409,
        'already-exists',
        'A draft is under way already; go on with it, or discard it first.',
      );
    }
    return Object.assign(lying, { text, baseVersion: base?.version ?? null });
  });

/** Keeps what was typed, right or wrong. */
export async function saveProtocolDraft(
  em: EntityManager,
  seenRevision: number,
  { text }: ProtocolTextBody,
): Promise<ProtocolDraft> {
  const { id } = await readProtocolDraft(em);
  return act(em, about('protocol-drafted'), async (tx) => {
    await assertStudyOpen(tx);
    const draft = await tx.findOneOrFail(ProtocolDraftSchema, id);
    assertRevision(draft, seenRevision);
    authorize('update', 'ProtocolDraft', draft);
    draft.text = text;
    return draft;
  });
}

/** Gives an amendment up: back to the version it was begun from, or to a blank one. */
export async function discardProtocolDraft(
  em: EntityManager,
  seenRevision: number,
  { reason }: { reason: string },
): Promise<ProtocolDraft> {
  const { id } = await readProtocolDraft(em);
  return act(em, about('protocol-drafted', reason), async (tx) => {
    await assertStudyOpen(tx);
    const draft = await tx.findOneOrFail(ProtocolDraftSchema, id);
    assertRevision(draft, seenRevision);
    authorize('update', 'ProtocolDraft', draft);
    if (!(await isAmended(tx, draft)))
      throw stateForbids('There is nothing to discard: nothing was changed.');
    const base = await newestProtocol(tx, draft.studyId);
    const study = await tx.findOneOrFail(StudySchema, draft.studyId);
    draft.text = draftText(base?.content ?? blankProtocol(study.title));
    draft.baseVersion = base?.version ?? null;
    return draft;
  });
}

/**
 * Publishes the draft as the next version, which never changes again (IV-01).
 * @throws Problem 422 `protocol-not-valid` naming each point that stands against it
 */
export async function publishProtocol(
  em: EntityManager,
  seenRevision: number,
  { reason }: { reason: string },
): Promise<ProtocolVersion> {
  const seen = await readProtocolDraft(em);
  assertRevision(seen, seenRevision);
  authorize('publish', 'ProtocolDraft', seen);
  const { problems, content } = await judgeProtocol(em, seen.studyId, seen.text);
  if (content === null) {
    const errors = problems.map(({ pointer, message, line }) => ({
      pointer,
      detail: `Line ${line}: ${message}`,
    }));
    throw new Problem(
      422,
      'protocol-not-valid',
      'The protocol cannot be published yet; each point is named below.',
      errors,
    );
  }
  const newest = await newestProtocol(em, seen.studyId);
  const hash = canonicalHash(content);
  if (newest?.hash === hash)
    throw stateForbids(`Nothing differs from version ${newest.version}; there is nothing to publish.`);
  const subject = ({ id }: ProtocolVersion) => ({ type: 'protocol-version', id });
  return act(em, { kind: 'protocol-published', reason, subject }, async (tx) => {
    await assertStudyOpen(tx);
    const draft = await tx.findOneOrFail(ProtocolDraftSchema, seen.id, { refresh: true });
    assertRevision(draft, seenRevision);
    const study = await tx.findOneOrFail(StudySchema, draft.studyId);
    study.plannedParticipants = content.plannedParticipants;
    const version = (newest?.version ?? 0) + 1;
    draft.baseVersion = version;
    draft.text = draftText(content);
    return tx.create(ProtocolVersionSchema, {
      studyId: draft.studyId,
      version,
      content,
      hash,
      reason,
      authorId: currentPersonId(),
      publishedAt: new Date(),
    });
  });
}

/** The study's draft, for those who may read it. */
async function readProtocolDraft(em: EntityManager): Promise<ProtocolDraft> {
  const draft = await em.findOne(ProtocolDraftSchema, { studyId: currentStudyId() });
  assertReadable('ProtocolDraft', draft, 'A draft of the protocol');
  return draft as ProtocolDraft;
}

export const newestProtocol = (em: EntityManager, studyId: string): Promise<ProtocolVersion | null> =>
  em.findOne(ProtocolVersionSchema, { studyId }, { orderBy: { version: 'desc' } });

/** Whether the draft says anything that its version, or a blank protocol, does not. */
export async function isAmended(em: EntityManager, draft: ProtocolDraft): Promise<boolean> {
  const { studyId, text, baseVersion } = draft;
  if (baseVersion != null) {
    const base = await em.findOne(ProtocolVersionSchema, { studyId, version: baseVersion });
    return base === null || text !== draftText(base.content);
  }
  const study = await em.findOneOrFail(StudySchema, studyId);
  return text !== draftText(blankProtocol(study.title));
}
