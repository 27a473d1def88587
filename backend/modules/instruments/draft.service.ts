import type { EntityManager } from '@mikro-orm/postgresql';
import type { DraftContentBody, StartDraftBody } from '#schemas/api/instruments.ts';
import { libraryInstruments } from '#schemas/instruments/library/index.ts';
import type { InstrumentSchema, SampleEntry } from '#schemas/instruments/instrument.ts';
import { act } from '#backend/database/act.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { notFound, Problem, stateForbids } from '#backend/http/problem.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { blankInstrument, draftText, isChanged } from './draft-text.ts';
import {
  InstrumentDraftSchema,
  InstrumentVersionSchema,
  type InstrumentDraft,
  type InstrumentVersion,
} from './instrument.entity.ts';

const about = (kind: string, reason: string | null = null) => ({
  kind,
  reason,
  subject: ({ id }: { id: string }) => ({ type: 'instrument-draft', id }),
});

/** Lays an instrument on the drafting table: from the library, blank, or from one of its versions. */
export const startDraft = (em: EntityManager, begin: StartDraftBody): Promise<InstrumentDraft> =>
  act(em, about('instrument-drafted'), async (tx) => {
    await assertStudyOpen(tx);
    const studyId = currentStudyId();
    authorize('create', 'InstrumentDraft', { studyId });
    const { key, schema, samples } = await beginning(tx, studyId, begin);
    const base = await newestVersion(tx, studyId, key);
    if (begin.from === 'blank' && base !== null) throw taken('is an instrument of this study already');
    const content = { text: draftText(schema), samples, baseVersion: base?.version ?? null };
    const lying = await tx.findOne(InstrumentDraftSchema, { studyId, key });
    if (lying === null) return tx.create(InstrumentDraftSchema, { studyId, key, ...content });
    if (isChanged(lying, await baseOf(tx, lying))) {
      throw taken(`is on the drafting table already; go on with that draft, or discard it`);
    }
    return Object.assign(lying, content);
  });

/** Keeps what was typed, right or wrong. */
export async function saveDraft(
  em: EntityManager,
  draftId: string,
  seenRevision: number,
  { text, samples }: DraftContentBody,
): Promise<InstrumentDraft> {
  await readDraft(em, draftId);
  return act(em, about('instrument-drafted'), async (tx) => {
    await assertStudyOpen(tx);
    const draft = await tx.findOneOrFail(InstrumentDraftSchema, draftId);
    assertRevision(draft, seenRevision);
    authorize('update', 'InstrumentDraft', draft);
    draft.text = text;
    draft.samples = samples;
    return draft;
  });
}

/** Takes a draft off the table: back to the version it was begun from, or to nothing. */
export async function discardDraft(
  em: EntityManager,
  draftId: string,
  seenRevision: number,
  { reason }: { reason: string },
): Promise<InstrumentDraft> {
  await readDraft(em, draftId);
  return act(em, about('instrument-drafted', reason), async (tx) => {
    await assertStudyOpen(tx);
    const draft = await tx.findOneOrFail(InstrumentDraftSchema, draftId);
    assertRevision(draft, seenRevision);
    authorize('update', 'InstrumentDraft', draft);
    const base = await baseOf(tx, draft);
    if (!isChanged(draft, base)) throw stateForbids('There is nothing to discard: nothing was changed.');
    draft.text = base === null ? '' : draftText(base.schema);
    draft.samples = base?.samples ?? [];
    return draft;
  });
}

/** A draft that the actor may read. */
export async function readDraft(em: EntityManager, draftId: string): Promise<InstrumentDraft> {
  const draft = await em.findOne(InstrumentDraftSchema, draftId);
  assertReadable('InstrumentDraft', draft, 'This draft');
  return draft as InstrumentDraft;
}

/** The version a draft was begun from. */
export const baseOf = (
  em: EntityManager,
  { studyId, key, baseVersion }: Pick<InstrumentDraft, 'studyId' | 'key' | 'baseVersion'>,
): Promise<InstrumentVersion | null> =>
  baseVersion == null
    ? Promise.resolve(null)
    : em.findOne(InstrumentVersionSchema, { studyId, key, version: baseVersion });

const newestVersion = (em: EntityManager, studyId: string, key: string): Promise<InstrumentVersion | null> =>
  em.findOne(InstrumentVersionSchema, { studyId, key }, { orderBy: { version: 'desc' } });

async function beginning(
  tx: EntityManager,
  studyId: string,
  begin: StartDraftBody,
): Promise<{ key: string; schema: InstrumentSchema; samples: SampleEntry[] }> {
  if (begin.from === 'blank') {
    return { key: begin.key, schema: blankInstrument(begin.key, begin.title.trim()), samples: [] };
  }
  if (begin.from === 'library') {
    const found = libraryInstruments.find(({ key }) => key === begin.key);
    if (found === undefined) throw notFound('This instrument of the library');
    return found;
  }
  const version = await tx.findOne(InstrumentVersionSchema, { id: begin.versionId, studyId });
  if (version === null) throw notFound('This version');
  return version;
}

const taken = (detail: string): Problem =>
  new Problem(409, 'already-exists', `This key ${detail}.`, [{ pointer: '/key', detail }]);
