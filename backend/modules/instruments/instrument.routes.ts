import {
  differenceDto,
  instrumentDto,
  libraryInstrumentDto,
  versionDto,
  versionSummaryDto,
} from '#schemas/api/instruments.ts';
import { currentActor, currentStudyId } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { notFound } from '#backend/http/problem.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { compareInstruments } from './compare-instruments.ts';
import {
  findVersion,
  listInstruments,
  listLibrary,
  listVersions,
  readVersion,
} from './instrument.queries.ts';
import { validatorByHash } from './preview.ts';

/** Published instruments, for every member; the library, for who drafts. */
export function declareInstrumentRoutes({ route }: RouteTable, { orm }: Deps): void {
  route({
    method: 'get',
    path: '/studies/:studyCode/instruments',
    summary: 'Instruments of the study: newest versions, and drafts for those who may see them',
    gate: ['read', 'InstrumentVersion'],
    responds: { status: 200, body: { type: 'array', items: instrumentDto } },
    acts: null,
    handler: async (_request, response) => {
      response.json(await listInstruments(orm.em));
    },
  });

  route({
    method: 'get',
    path: '/studies/:studyCode/instrument-library',
    summary: 'Instruments that come with the product',
    gate: ['create', 'InstrumentDraft'],
    responds: { status: 200, body: { type: 'array', items: libraryInstrumentDto } },
    acts: null,
    handler: (_request, response) => {
      response.json(listLibrary());
    },
  });

  route({
    method: 'get',
    path: '/studies/:studyCode/instruments/:instrumentKey/versions',
    summary: 'Versions of an instrument, newest first',
    gate: ['read', 'InstrumentVersion'],
    responds: { status: 200, body: { type: 'array', items: versionSummaryDto } },
    acts: null,
    handler: async (request, response) => {
      const versions = await listVersions(orm.em, String(request.params['instrumentKey']));
      if (versions.length === 0) throw notFound('This instrument');
      response.json(versions);
    },
  });

  route({
    method: 'get',
    path: '/studies/:studyCode/instrument-versions/:versionId',
    summary: 'A published version with its schema',
    gate: ['read', 'InstrumentVersion'],
    responds: { status: 200, body: versionDto },
    acts: null,
    handler: async (request, response) => {
      response.json(await readVersion(orm.em, idParameter(request, 'versionId')));
    },
  });

  route({
    method: 'get',
    path: '/studies/:studyCode/instrument-versions/:versionId/differences/:otherId',
    summary: 'What a version changed against another one of the same instrument',
    gate: ['read', 'InstrumentVersion'],
    responds: { status: 200, body: { type: 'array', items: differenceDto } },
    acts: null,
    handler: async (request, response) => {
      const version = await findVersion(orm.em, idParameter(request, 'versionId'));
      const other = await findVersion(orm.em, idParameter(request, 'otherId'));
      if (other.key !== version.key) throw notFound('This version of the same instrument');
      response.json(compareInstruments(other.schema, version.schema));
    },
  });

  route({
    method: 'get',
    path: '/studies/:studyCode/instruments/validators/:file',
    summary: 'The script that validates an instrument’s form, by the hash of its schema',
    gate: ['read', 'InstrumentVersion'],
    responds: { status: 200, body: null },
    acts: null,
    handler: async (request, response) => {
      const [, hash] = /^([0-9a-f]{64})\.js$/.exec(String(request.params['file'])) ?? [];
      const drafts = currentActor().ability.can('read', 'InstrumentDraft');
      const code =
        hash === undefined ? null : await validatorByHash(orm.em, currentStudyId(), hash, { drafts });
      if (code === null) throw notFound('This script');
      response
        .set('Cache-Control', 'private, max-age=31536000, immutable')
        .type('text/javascript')
        .send(code);
    },
  });
}
