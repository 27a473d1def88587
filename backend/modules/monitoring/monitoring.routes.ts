import {
  askQueryBody,
  queryListQuery,
  queryTextBody,
  verifyBody,
  type AskQueryBody,
  type QueryTextBody,
  type VerifyBody,
} from '#schemas/api/monitoring.ts';
import { voidEntryBody } from '#schemas/api/capture.ts';
import type { Deps } from '#backend/http/deps.ts';
import { listOf, pageQuery } from '#backend/http/list.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { loadVisit } from '../capture/index.ts';
import { listQueries, presentQueries } from './query.presenter.ts';
import { askQuery, loadQuery, reopenQuery, replyToQuery, settleQuery } from './query.service.ts';
import { clearMark, verificationOf, verify } from './verification.service.ts';

const study = '/studies/:studyCode';
const anyObject = { type: 'object' } as const;

/** Queries and verification. */
export function declareMonitoringRoutes({ route }: RouteTable, { orm: { em } }: Deps): void {
  route({
    method: 'get',
    path: `${study}/queries`,
    summary: 'Queries, the oldest first',
    gate: ['read', 'Query'],
    query: { type: 'object', additionalProperties: false, properties: { ...pageQuery, ...queryListQuery } },
    responds: { status: 200, body: listOf(anyObject) },
    acts: null,
    handler: async (request, response) => {
      response.json(await listQueries(em, request.query));
    },
  });

  route({
    method: 'post',
    path: `${study}/queries`,
    summary: 'Ask about a field, an entry, a visit or a participant',
    gate: ['ask', 'Query'],
    body: askQueryBody,
    responds: { status: 201, body: anyObject },
    acts: ['query-asked'],
    handler: async (request, response) => {
      const query = await askQuery(em, request.body as AskQueryBody);
      response
        .status(201)
        .set('ETag', etag(query.revision))
        .json((await presentQueries(em.fork(), [query]))[0]);
    },
  });

  route({
    method: 'get',
    path: `${study}/queries/:queryId`,
    summary: 'One query with its thread',
    gate: ['read', 'Query'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (request, response) => {
      const query = await loadQuery(em, idParameter(request, 'queryId'));
      response.set('ETag', etag(query.revision)).json((await presentQueries(em, [query]))[0]);
    },
  });

  const steps = [
    ['replies', 'Reply to a query', 'reply', 'query-replied', replyToQuery],
    ['settling', 'Settle a query', 'settle', 'query-settled', settleQuery],
    ['reopening', 'Open a settled query again', 'settle', 'query-reopened', reopenQuery],
  ] as const;
  for (const [path, summary, action, kind, change] of steps) {
    route({
      method: 'post',
      path: `${study}/queries/:queryId/${path}`,
      summary,
      gate: [action, 'Query'],
      body: queryTextBody,
      responds: { status: 200, body: anyObject },
      acts: [kind],
      handler: async (request, response) => {
        const { text } = request.body as QueryTextBody;
        const query = await change(em, idParameter(request, 'queryId'), ifMatch(request), text);
        response.set('ETag', etag(query.revision)).json((await presentQueries(em.fork(), [query]))[0]);
      },
    });
  }

  route({
    method: 'get',
    path: `${study}/visits/:visitId/verification`,
    summary: 'The fields of a visit with their verification marks',
    gate: ['read', 'VerificationMark'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (request, response) => {
      response.json(await verificationOf(em, await loadVisit(em, idParameter(request, 'visitId'))));
    },
  });

  route({
    method: 'post',
    path: `${study}/visits/:visitId/verification`,
    summary: 'Mark values as agreeing with a source document',
    gate: ['verify', 'Entry'],
    body: verifyBody,
    responds: { status: 200, body: anyObject },
    acts: ['value-verified'],
    handler: async (request, response) => {
      const visit = await verify(em, idParameter(request, 'visitId'), request.body as VerifyBody);
      response.json(await verificationOf(em.fork(), visit));
    },
  });

  route({
    method: 'post',
    path: `${study}/verification-marks/:markId/clearing`,
    summary: 'Take a verification mark back',
    gate: ['verify', 'Entry'],
    body: voidEntryBody,
    responds: { status: 204, body: null },
    acts: ['verification-cleared'],
    handler: async (request, response) => {
      await clearMark(em, idParameter(request, 'markId'), (request.body as { reason: string }).reason);
      response.status(204).end();
    },
  });
}
