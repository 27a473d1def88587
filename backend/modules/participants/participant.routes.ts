import type { Request, Response } from 'express';
import {
  confirmEligibilityBody,
  enrolParticipantBody,
  participantDto,
  withdrawParticipantBody,
  type ConfirmEligibilityBody,
  type EnrolParticipantBody,
  type WithdrawParticipantBody,
} from '#schemas/api/participants.ts';
import { participantStates } from '#schemas/vocabulary/states.ts';
import type { Deps } from '#backend/http/deps.ts';
import { idempotencyKey } from '#backend/http/idempotency.ts';
import { listOf, pageQuery } from '#backend/http/list.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import type { Participant } from './participant.entity.ts';
import { presentParticipant, presentParticipants } from './participant.presenter.ts';
import { listParticipants, participantByCode, readableParticipant } from './participant.queries.ts';
import { enrolParticipant } from './enrol-participant.ts';
import { confirmEligibility, withdrawParticipant } from './participant.service.ts';

const participants = '/studies/:studyCode/participants';

/** Participants by code: list, enrolment, eligibility, withdrawal. */
export function declareParticipantRoutes({ route }: RouteTable, { orm, settings }: Deps): void {
  const { em } = orm;

  const answer = async (response: Response, participant: Participant, status = 200): Promise<void> => {
    response.status(status).set('ETag', etag(participant.revision));
    response.json(await presentParticipant(em.fork(), participant));
  };

  route({
    method: 'get',
    path: participants,
    summary: 'Participants by code',
    gate: ['read', 'Participant'],
    query: {
      type: 'object',
      additionalProperties: false,
      properties: {
        ...pageQuery,
        site: { type: 'string', format: 'uuid' },
        state: { enum: participantStates },
        code: { type: 'string', pattern: '^[A-Za-z0-9-]{1,12}$' },
      },
    },
    responds: { status: 200, body: listOf(participantDto) },
    acts: null,
    handler: async (request, response) => {
      const { rows, nextCursor } = await listParticipants(em, request.query);
      response.json({ items: await presentParticipants(em, rows), nextCursor });
    },
  });

  route({
    method: 'post',
    path: participants,
    summary: 'Enrol a participant with direct identifiers',
    gate: ['create', 'Participant'],
    body: enrolParticipantBody,
    responds: { status: 201, body: participantDto },
    acts: ['participant-enrolled'],
    handler: async (request, response) => {
      const body = request.body as EnrolParticipantBody;
      const enrolled = await enrolParticipant(em, settings.identity, body, idempotencyKey(request));
      await answer(response, enrolled, 201);
    },
  });

  route({
    method: 'get',
    path: `${participants}/by-code/:code`,
    summary: 'One participant, by code',
    gate: ['read', 'Participant'],
    responds: { status: 200, body: participantDto },
    acts: null,
    handler: async (request, response) => {
      await answer(response, await participantByCode(em, String(request.params['code'])));
    },
  });

  route({
    method: 'get',
    path: `${participants}/:participantId`,
    summary: 'One participant',
    gate: ['read', 'Participant'],
    responds: { status: 200, body: participantDto },
    acts: null,
    handler: async (request, response) => {
      await answer(response, await readableParticipant(em, participantOf(request)));
    },
  });

  route({
    method: 'put',
    path: `${participants}/:participantId/eligibility`,
    summary: 'Confirm that the criteria for taking part are met',
    gate: ['read', 'Participant'],
    body: confirmEligibilityBody,
    responds: { status: 200, body: participantDto },
    acts: ['eligibility-confirmed'],
    handler: async (request, response) => {
      const body = request.body as ConfirmEligibilityBody;
      await answer(response, await confirmEligibility(em, participantOf(request), ifMatch(request), body));
    },
  });

  route({
    method: 'post',
    path: `${participants}/:participantId/withdrawal`,
    summary: 'Record a withdrawal',
    gate: ['read', 'Participant'],
    body: withdrawParticipantBody,
    responds: { status: 200, body: participantDto },
    acts: ['participant-withdrawn'],
    handler: async (request, response) => {
      const body = request.body as WithdrawParticipantBody;
      await answer(response, await withdrawParticipant(em, participantOf(request), ifMatch(request), body));
    },
  });
}

const participantOf = (request: Request): string => idParameter(request, 'participantId');
