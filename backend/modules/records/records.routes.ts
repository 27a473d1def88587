import {
  lockBody,
  signVisitBody,
  trailQuery,
  unlockBody,
  type LockBody,
  type SignVisitBody,
  type StudyLockDto,
  type UnlockBody,
} from '#schemas/api/records.ts';
import type { EntityManager } from '@mikro-orm/postgresql';
import { currentStudyId } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { listOf, pageQuery } from '#backend/http/list.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { systemChain } from '#backend/database/act.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { loadVisit } from '../capture/index.ts';
import { checkChain } from './check-chain.ts';
import { lockStudy, openPoints, unlockStudy } from './lock.service.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { StudyLockSchema, type StudyLock } from './records.entity.ts';
import { prepareSignature, signaturesOf, signVisit } from './signature.service.ts';
import { listTrail } from './trail-list.ts';

const study = '/studies/:studyCode';
const anyObject = { type: 'object' } as const;
const list = { type: 'array', items: anyObject } as const;
const trailParameters = {
  type: 'object',
  additionalProperties: false,
  properties: { ...pageQuery, ...trailQuery },
} as const;

async function presentLocks(em: EntityManager, rows: readonly StudyLock[]): Promise<StudyLockDto[]> {
  const people = await em.find(PersonSchema, { id: { $in: rows.map(({ byId }) => byId) } });
  const names = new Map(people.map(({ id, name }) => [id, name]));
  return rows.map(({ kind, byId, at, reason, openPoints: points }) => ({
    kind,
    by: names.get(byId) ?? '',
    at: at.toISOString(),
    reason,
    openPoints: points,
  }));
}

/** Signatures, the lock, the trail. */
export function declareRecordRoutes({ route }: RouteTable, { orm: { em }, settings }: Deps): void {
  route({
    method: 'get',
    path: `${study}/visits/:visitId/signatures`,
    summary: 'The signatures of a visit, and whether each still covers it',
    gate: ['read', 'Signature'],
    responds: { status: 200, body: list },
    acts: null,
    handler: async (request, response) => {
      response.json(await signaturesOf(em, await loadVisit(em, idParameter(request, 'visitId'))));
    },
  });

  route({
    method: 'get',
    path: `${study}/visits/:visitId/signature-preparation`,
    summary: 'What a signature on this visit would cover',
    gate: ['sign', 'Visit'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (request, response) => {
      response.json(await prepareSignature(em, settings.sessionSecret, idParameter(request, 'visitId')));
    },
  });

  route({
    method: 'post',
    path: `${study}/visits/:visitId/signatures`,
    summary: 'Sign a completed visit with the password',
    gate: ['sign', 'Visit'],
    body: signVisitBody,
    responds: { status: 201, body: list },
    acts: ['visit-signed', 'signature-refused'],
    handler: async (request, response) => {
      const visitId = idParameter(request, 'visitId');
      await signVisit(em, settings.sessionSecret, visitId, request.body as SignVisitBody);
      const fork = em.fork();
      response.status(201).json(await signaturesOf(fork, await loadVisit(fork, visitId)));
    },
  });

  route({
    method: 'get',
    path: `${study}/lock`,
    summary: 'What is still open, and every lock and unlock',
    gate: ['read', 'StudyLock'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (_request, response) => {
      const rows = await em.find(StudyLockSchema, { studyId: currentStudyId() }, { orderBy: { at: 'desc' } });
      // What is open matters until the lock; afterwards the lock's own record says what was left open.
      const running = (await em.findOneOrFail(StudySchema, currentStudyId())).state === 'running';
      const points = running ? await openPoints(em) : [];
      response.json({ openPoints: points, history: await presentLocks(em, rows) });
    },
  });

  route({
    method: 'post',
    path: `${study}/lock`,
    summary: 'Lock the study with the password',
    gate: ['lock', 'Study'],
    body: lockBody,
    responds: { status: 201, body: anyObject },
    acts: ['study-locked', 'signature-refused'],
    handler: async (request, response) => {
      const row = await lockStudy(em, request.body as LockBody);
      response.status(201).json((await presentLocks(em.fork(), [row]))[0]);
    },
  });

  route({
    method: 'post',
    path: `${study}/unlock`,
    summary: 'Unlock the study with a reason',
    gate: ['lock', 'Study'],
    body: unlockBody,
    responds: { status: 201, body: anyObject },
    acts: ['study-unlocked', 'signature-refused'],
    handler: async (request, response) => {
      const row = await unlockStudy(em, request.body as UnlockBody);
      response.status(201).json((await presentLocks(em.fork(), [row]))[0]);
    },
  });

  route({
    method: 'get',
    path: `${study}/audit-events`,
    summary: 'The study’s trail, newest first',
    gate: ['read', 'AuditEvent'],
    query: trailParameters,
    responds: { status: 200, body: listOf(anyObject) },
    acts: null,
    handler: async (request, response) => {
      response.json(await listTrail(em, request.query));
    },
  });

  route({
    method: 'get',
    path: `${study}/audit-events/check`,
    summary: 'Follow the study’s chain from its first event to its head',
    gate: ['read', 'AuditEvent'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (_request, response) => {
      response.json(await checkChain(em, currentStudyId()));
    },
  });

  route({
    method: 'get',
    path: '/audit-events',
    summary: 'The system’s trail: accounts, memberships, sign-ins',
    gate: ['read', 'AuditEvent'],
    query: trailParameters,
    responds: { status: 200, body: listOf(anyObject) },
    acts: null,
    handler: async (request, response) => {
      response.json(await listTrail(em, request.query));
    },
  });

  route({
    method: 'get',
    path: '/audit-events/check',
    summary: 'Follow the system’s chain',
    gate: ['administer', 'Person'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (_request, response) => {
      response.json(await checkChain(em, systemChain));
    },
  });
}
