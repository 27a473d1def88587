import {
  identifiersDto,
  identifiersReadingDto,
  readIdentifiersBody,
  writeIdentifiersBody,
  type ReadIdentifiersBody,
  type WriteIdentifiersBody,
} from '#schemas/api/participants.ts';
import type { Deps } from '#backend/http/deps.ts';
import { listOf, pageQuery } from '#backend/http/list.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { listIdentifiersReadings } from './identifiers.queries.ts';
import { readIdentifiers, writeIdentifiers } from './identifiers.service.ts';

const identifiers = '/studies/:studyCode/participants/:participantId/identifiers';

/** Direct identifiers: reading them is an act, and there is no list of them. */
export function declareIdentifiersRoutes({ route }: RouteTable, { orm: { em }, settings }: Deps): void {
  route({
    method: 'post',
    path: `${identifiers}/reading`,
    summary: 'Read who a participant is; the look is written down',
    gate: ['read', 'Participant'],
    body: readIdentifiersBody,
    responds: { status: 200, body: identifiersDto },
    acts: ['identifiers-read'],
    handler: async (request, response) => {
      const participantId = idParameter(request, 'participantId');
      const { reason } = request.body as ReadIdentifiersBody;
      const shown = await readIdentifiers(em, settings.identity, participantId, reason ?? null);
      response.set('ETag', etag(shown.revision)).json(shown);
    },
  });

  route({
    method: 'get',
    path: `${identifiers}/readings`,
    summary: 'Who has read the identifiers of a participant',
    gate: ['read', 'Participant'],
    query: { type: 'object', additionalProperties: false, properties: pageQuery },
    responds: { status: 200, body: listOf(identifiersReadingDto) },
    acts: null,
    handler: async (request, response) => {
      const participantId = idParameter(request, 'participantId');
      response.json(await listIdentifiersReadings(em, participantId, request.query));
    },
  });

  route({
    method: 'put',
    path: identifiers,
    summary: 'Correct direct identifiers',
    gate: ['read', 'Participant'],
    body: writeIdentifiersBody,
    responds: { status: 204, body: null },
    acts: ['identifiers-written'],
    handler: async (request, response) => {
      const participantId = idParameter(request, 'participantId');
      const body = request.body as WriteIdentifiersBody;
      const row = await writeIdentifiers(em, settings.identity, participantId, ifMatch(request), body);
      response.set('ETag', etag(row.revision)).status(204).end();
    },
  });
}
