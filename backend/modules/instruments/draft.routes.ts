import type { Response } from 'express';
import { reasonBody, type ReasonBody } from '#schemas/api/accounts.ts';
import {
  draftContentBody,
  draftDto,
  publishBody,
  startDraftBody,
  verdictDto,
  versionDto,
  type DraftContentBody,
  type StartDraftBody,
  type VerdictDto,
} from '#schemas/api/instruments.ts';
import type { Deps } from '#backend/http/deps.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { discardDraft, readDraft, saveDraft, startDraft } from './draft.service.ts';
import type { InstrumentDraft } from './instrument.entity.ts';
import { presentDraft, readVersion } from './instrument.queries.ts';
import { judgeDraft } from './judge-draft.ts';
import { keepPreview } from './preview.ts';
import { publishDraft } from './publish.service.ts';

const drafts = '/studies/:studyCode/instrument-drafts';

/** The drafting table: begin, write, try, discard, publish. */
export function declareDraftRoutes({ route }: RouteTable, { orm }: Deps): void {
  route({
    method: 'post',
    path: drafts,
    summary: 'Begin a draft from the library, blank, or from a version',
    gate: ['create', 'InstrumentDraft'],
    body: startDraftBody,
    responds: { status: 201, body: draftDto },
    acts: ['instrument-drafted'],
    handler: async (request, response) => {
      await answer(response.status(201), await startDraft(orm.em, request.body as StartDraftBody));
    },
  });

  route({
    method: 'get',
    path: `${drafts}/:draftId`,
    summary: 'A draft as it was typed',
    gate: ['read', 'InstrumentDraft'],
    responds: { status: 200, body: draftDto },
    acts: null,
    handler: async (request, response) => {
      await answer(response, await readDraft(orm.em, idParameter(request, 'draftId')));
    },
  });

  route({
    method: 'put',
    path: `${drafts}/:draftId`,
    summary: 'Keep the text and the samples of a draft, right or wrong',
    gate: ['update', 'InstrumentDraft'],
    body: draftContentBody,
    responds: { status: 200, body: draftDto },
    acts: ['instrument-drafted'],
    handler: async (request, response) => {
      const id = idParameter(request, 'draftId');
      await answer(response, await saveDraft(orm.em, id, ifMatch(request), request.body as DraftContentBody));
    },
  });

  route({
    method: 'post',
    path: `${drafts}/:draftId/check`,
    summary: 'Judge a text and samples as this draft, without keeping them',
    gate: ['read', 'InstrumentDraft'],
    body: draftContentBody,
    responds: { status: 200, body: verdictDto },
    acts: [],
    handler: async (request, response) => {
      const { studyId, key } = await readDraft(orm.em, idParameter(request, 'draftId'));
      const content = request.body as DraftContentBody;
      const judgement = await judgeDraft(orm.em, { ...content, studyId, key });
      const { publishable, problems, samples, differences, instrument } = judgement;
      if (instrument !== null) await keepPreview(orm.em, studyId, instrument);
      const validatorHash = instrument?.hash ?? null;
      response.json({ publishable, problems, samples, differences, validatorHash } satisfies VerdictDto);
    },
  });

  route({
    method: 'post',
    path: `${drafts}/:draftId/discarding`,
    summary: 'Take a draft off the table',
    gate: ['update', 'InstrumentDraft'],
    body: reasonBody,
    responds: { status: 200, body: draftDto },
    acts: ['instrument-drafted'],
    handler: async (request, response) => {
      const id = idParameter(request, 'draftId');
      await answer(response, await discardDraft(orm.em, id, ifMatch(request), request.body as ReasonBody));
    },
  });

  route({
    method: 'post',
    path: `${drafts}/:draftId/publication`,
    summary: 'Publish a draft as the next version, which never changes',
    gate: ['publish', 'InstrumentDraft'],
    body: publishBody,
    responds: { status: 201, body: versionDto },
    acts: ['instrument-published'],
    handler: async (request, response) => {
      const id = idParameter(request, 'draftId');
      const version = await publishDraft(orm.em, id, ifMatch(request), request.body as ReasonBody);
      response.status(201).json(await readVersion(orm.em, version.id));
    },
  });

  async function answer(response: Response, draft: InstrumentDraft): Promise<void> {
    response.set('ETag', etag(draft.revision)).json(await presentDraft(orm.em, draft));
  }
}
