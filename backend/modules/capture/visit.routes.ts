import type { Request } from 'express';
import {
  beginVisitBody,
  emptyBody,
  missVisitBody,
  noteDeviationBody,
  planVisitBody,
  rescheduleVisitBody,
  stampStepBody,
  visitDto,
  type BeginVisitBody,
  type MissVisitBody,
  type NoteDeviationBody,
  type PlanVisitBody,
  type RescheduleVisitBody,
  type StampStepBody,
} from '#schemas/api/capture.ts';
import { visitStates } from '#schemas/vocabulary/states.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { assertReadable } from '#backend/http/authorize.ts';
import type { Deps } from '#backend/http/deps.ts';
import { listOf, pageQuery } from '#backend/http/list.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { liveQuantities } from './live-quantities.ts';
import type { Visit } from './visit.entity.ts';
import { listVisits, presentVisits } from './visit-list.ts';
import { presentOneVisit, presentRunSheet } from './visit.presenter.ts';
import {
  beginVisit,
  completeVisit,
  loadVisit,
  missVisit,
  noteDeviation,
  planVisit,
  rescheduleVisit,
  stampStep,
} from './visit.service.ts';
import { VisitSchema } from './visit.entity.ts';

const study = '/studies/:studyCode';
const anyObject = { type: 'object' } as const;

/** Visits and their run sheets. */
export function declareVisitRoutes({ route }: RouteTable, { orm: { em } }: Deps): void {
  route({
    method: 'get',
    path: `${study}/visits`,
    summary: 'Visits by planned day',
    gate: ['read', 'Visit'],
    query: {
      type: 'object',
      additionalProperties: false,
      properties: {
        ...pageQuery,
        from: { type: 'string', format: 'date' },
        to: { type: 'string', format: 'date' },
        state: { enum: visitStates },
        participant: { type: 'string', format: 'uuid' },
      },
    },
    responds: { status: 200, body: listOf(visitDto) },
    acts: null,
    handler: async (request, response) => {
      response.json(await listVisits(em, request.query));
    },
  });

  route({
    method: 'get',
    path: `${study}/participants/:participantId/visits`,
    summary: 'The visits of one participant',
    gate: ['read', 'Visit'],
    responds: { status: 200, body: listOf(visitDto) },
    acts: null,
    handler: async (request, response) => {
      const participant = idParameter(request, 'participantId');
      const known = await em.findOne(ParticipantSchema, { studyId: currentStudyId(), id: participant });
      assertReadable('Participant', known, 'This participant');
      response.json(await listVisits(em, { participant, limit: '100' }));
    },
  });

  route({
    method: 'post',
    path: `${study}/participants/:participantId/visits`,
    summary: 'Plan a visit',
    gate: ['create', 'Visit'],
    body: planVisitBody,
    responds: { status: 201, body: visitDto },
    acts: ['visit-planned'],
    handler: async (request, response) => {
      const visit = await planVisit(em, idParameter(request, 'participantId'), request.body as PlanVisitBody);
      response
        .status(201)
        .set('ETag', etag(visit.revision))
        .json(await presentOneVisit(em, visit));
    },
  });

  route({
    method: 'get',
    path: `${study}/visits/:visitId`,
    summary: 'The run sheet of a visit',
    gate: ['read', 'Visit'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (request, response) => {
      const visit = await loadVisit(em, idParameter(request, 'visitId'));
      response.set('ETag', etag(visit.revision)).json(await presentRunSheet(em, visit));
    },
  });

  route({
    method: 'get',
    path: `${study}/visits/:visitId/quantities`,
    summary: 'What the visit measures so far, computed as the readings go in',
    gate: ['read', 'Visit'],
    responds: { status: 200, body: { type: 'array', items: anyObject } },
    acts: null,
    handler: async (request, response) => {
      const visit = await loadVisit(em, idParameter(request, 'visitId'));
      response.json(await liveQuantities(em, visit));
    },
  });

  const change = (
    path: string,
    summary: string,
    act: 'visit-rescheduled' | 'visit-missed' | 'visit-begun' | 'visit-completed',
    body: object,
    work: (request: Request, visitId: string, seen: number) => Promise<Visit>,
  ): void =>
    route({
      method: 'post',
      path: `${study}/visits/:visitId/${path}`,
      summary,
      gate: [act === 'visit-completed' ? 'complete' : 'update', 'Visit'],
      body,
      responds: { status: 200, body: visitDto },
      acts: [act],
      handler: async (request, response) => {
        const visit = await work(request, idParameter(request, 'visitId'), ifMatch(request));
        response.set('ETag', etag(visit.revision)).json((await presentVisits(em, [visit]))[0]);
      },
    });

  change(
    'rescheduling',
    'Move a planned visit to another day',
    'visit-rescheduled',
    rescheduleVisitBody,
    (request, id, seen) => rescheduleVisit(em, id, seen, request.body as RescheduleVisitBody),
  );
  change(
    'missing',
    'Record that a visit did not take place',
    'visit-missed',
    missVisitBody,
    (request, id, seen) => missVisit(em, id, seen, request.body as MissVisitBody),
  );
  change('beginning', 'Begin a visit', 'visit-begun', beginVisitBody, (request, id, seen) =>
    beginVisit(em, id, seen, request.body as BeginVisitBody),
  );
  change('completion', 'Complete a visit', 'visit-completed', emptyBody, (_request, id, seen) =>
    completeVisit(em, id, seen),
  );

  route({
    method: 'post',
    path: `${study}/visits/:visitId/step-events`,
    summary: 'Stamp a step of the run sheet',
    gate: ['update', 'Visit'],
    body: stampStepBody,
    responds: { status: 201, body: anyObject },
    acts: ['step-stamped'],
    handler: async (request, response) => {
      const visit = await stampStep(em, idParameter(request, 'visitId'), request.body as StampStepBody);
      response
        .status(201)
        .json(await presentRunSheet(em.fork(), await em.fork().findOneOrFail(VisitSchema, visit.id)));
    },
  });

  route({
    method: 'post',
    path: `${study}/visits/:visitId/deviations`,
    summary: 'Note a deviation',
    gate: ['create', 'Deviation'],
    body: noteDeviationBody,
    responds: { status: 201, body: anyObject },
    acts: ['deviation-noted'],
    handler: async (request, response) => {
      const visit = await noteDeviation(
        em,
        idParameter(request, 'visitId'),
        request.body as NoteDeviationBody,
      );
      response.status(201).json(await presentRunSheet(em.fork(), visit));
    },
  });
}
