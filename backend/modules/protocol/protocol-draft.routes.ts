import type { Response } from 'express';
import { reasonBody, type ReasonBody } from '#schemas/api/accounts.ts';
import {
  protocolDraftDto,
  protocolTextBody,
  protocolVerdictDto,
  protocolVersionDto,
  startProtocolDraftBody,
  type ProtocolTextBody,
  type ProtocolVerdictDto,
  type StartProtocolDraftBody,
} from '#schemas/api/protocol.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { judgeProtocol } from './judge-protocol.ts';
import {
  discardProtocolDraft,
  newestProtocol,
  publishProtocol,
  saveProtocolDraft,
  startProtocolDraft,
} from './protocol-draft.service.ts';
import { ProtocolDraftSchema, type ProtocolDraft } from './protocol.entity.ts';
import {
  presentProtocolDraft,
  presentProtocolVersion,
  shownDifferences,
  shownProtocol,
} from './protocol.queries.ts';

const draftPath = '/studies/:studyCode/protocol-draft';

/** The draft of the protocol or of its next amendment. */
export function declareProtocolDraftRoutes({ route }: RouteTable, { orm }: Deps): void {
  route({
    method: 'post',
    path: draftPath,
    summary: 'Begin the protocol, or an amendment of its newest version',
    gate: ['create', 'ProtocolDraft'],
    body: startProtocolDraftBody,
    responds: { status: 201, body: protocolDraftDto },
    acts: ['protocol-drafted'],
    handler: async (request, response) => {
      await answer(
        response.status(201),
        await startProtocolDraft(orm.em, request.body as StartProtocolDraftBody),
      );
    },
  });

  route({
    method: 'get',
    path: draftPath,
    summary: 'The draft as it was typed; null while nobody has begun one',
    gate: ['read', 'ProtocolDraft'],
    responds: { status: 200, body: { anyOf: [{ type: 'null' }, protocolDraftDto] } },
    acts: null,
    handler: async (_request, response) => {
      const where = accessible('read', 'ProtocolDraft');
      const draft = where && (await orm.em.findOne(ProtocolDraftSchema, where));
      if (draft === null) response.json(null);
      else await answer(response, draft);
    },
  });

  route({
    method: 'put',
    path: draftPath,
    summary: 'Keep the text of the draft, right or wrong',
    gate: ['update', 'ProtocolDraft'],
    body: protocolTextBody,
    responds: { status: 200, body: protocolDraftDto },
    acts: ['protocol-drafted'],
    handler: async (request, response) => {
      await answer(
        response,
        await saveProtocolDraft(orm.em, ifMatch(request), request.body as ProtocolTextBody),
      );
    },
  });

  route({
    method: 'post',
    path: `${draftPath}/check`,
    summary: 'Judge a text as this draft, without keeping it',
    gate: ['read', 'ProtocolDraft'],
    body: protocolTextBody,
    responds: { status: 200, body: protocolVerdictDto },
    acts: [],
    handler: async (request, response) => {
      const studyId = currentStudyId();
      const { problems, content } = await judgeProtocol(
        orm.em,
        studyId,
        (request.body as ProtocolTextBody).text,
      );
      const newest = await newestProtocol(orm.em, studyId);
      const differences =
        content === null || newest === null ? [] : shownDifferences(newest.content, content);
      response.json({
        publishable: content !== null,
        problems,
        differences,
        content: content && shownProtocol(content),
      } satisfies ProtocolVerdictDto);
    },
  });

  route({
    method: 'post',
    path: `${draftPath}/discarding`,
    summary: 'Give the draft up',
    gate: ['update', 'ProtocolDraft'],
    body: reasonBody,
    responds: { status: 200, body: protocolDraftDto },
    acts: ['protocol-drafted'],
    handler: async (request, response) => {
      await answer(
        response,
        await discardProtocolDraft(orm.em, ifMatch(request), request.body as ReasonBody),
      );
    },
  });

  route({
    method: 'post',
    path: `${draftPath}/publication`,
    summary: 'Publish the draft as the next version, which never changes',
    gate: ['publish', 'ProtocolDraft'],
    body: reasonBody,
    responds: { status: 201, body: protocolVersionDto },
    acts: ['protocol-published'],
    handler: async (request, response) => {
      const version = await publishProtocol(orm.em, ifMatch(request), request.body as ReasonBody);
      response.status(201).json(await presentProtocolVersion(orm.em, version));
    },
  });

  async function answer(response: Response, draft: ProtocolDraft): Promise<void> {
    response.set('ETag', etag(draft.revision)).json(await presentProtocolDraft(orm.em, draft));
  }
}
