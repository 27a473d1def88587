import { reasonBody, type ReasonBody } from '#schemas/api/accounts.ts';
import {
  enrolmentDto,
  protocolDifferenceDto,
  protocolVersionDto,
  protocolVersionSummaryDto,
} from '#schemas/api/protocol.ts';
import type { Deps } from '#backend/http/deps.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { readEnrolment, startEnrolment } from './enrolment.service.ts';
import {
  findProtocolVersion,
  listProtocolVersions,
  presentProtocolVersion,
  shownDifferences,
} from './protocol.queries.ts';

const versionsPath = '/studies/:studyCode/protocol-versions';

/** Versions of the protocol, for every member, and the opening of the study for enrolment. */
export function declareProtocolVersionRoutes({ route }: RouteTable, { orm }: Deps): void {
  route({
    method: 'get',
    path: versionsPath,
    summary: 'Versions of the protocol, newest first',
    gate: ['read', 'ProtocolVersion'],
    responds: { status: 200, body: { type: 'array', items: protocolVersionSummaryDto } },
    acts: null,
    handler: async (_request, response) => {
      response.json(await listProtocolVersions(orm.em));
    },
  });

  route({
    method: 'get',
    path: `${versionsPath}/:versionId`,
    summary: 'A published version of the protocol',
    gate: ['read', 'ProtocolVersion'],
    responds: { status: 200, body: protocolVersionDto },
    acts: null,
    handler: async (request, response) => {
      const version = await findProtocolVersion(orm.em, idParameter(request, 'versionId'));
      response.json(await presentProtocolVersion(orm.em, version));
    },
  });

  route({
    method: 'get',
    path: `${versionsPath}/:versionId/differences/:otherId`,
    summary: 'What a version changed against another one',
    gate: ['read', 'ProtocolVersion'],
    responds: { status: 200, body: { type: 'array', items: protocolDifferenceDto } },
    acts: null,
    handler: async (request, response) => {
      const version = await findProtocolVersion(orm.em, idParameter(request, 'versionId'));
      const other = await findProtocolVersion(orm.em, idParameter(request, 'otherId'));
      response.json(shownDifferences(other.content, version.content));
    },
  });

  route({
    method: 'get',
    path: '/studies/:studyCode/enrolment',
    summary: 'Whether the study is open for enrolment, and what stands against opening it',
    gate: ['read', 'Study'],
    responds: { status: 200, body: enrolmentDto },
    acts: null,
    handler: async (_request, response) => {
      const enrolment = await readEnrolment(orm.em);
      response.set('ETag', etag(enrolment.revision)).json(enrolment);
    },
  });

  route({
    method: 'post',
    path: '/studies/:studyCode/enrolment',
    summary: 'Open the study for enrolment',
    gate: ['open', 'Study'],
    body: reasonBody,
    responds: { status: 200, body: enrolmentDto },
    acts: ['enrolment-started'],
    handler: async (request, response) => {
      await startEnrolment(orm.em, ifMatch(request), request.body as ReasonBody);
      const enrolment = await readEnrolment(orm.em);
      response.set('ETag', etag(enrolment.revision)).json(enrolment);
    },
  });
}
