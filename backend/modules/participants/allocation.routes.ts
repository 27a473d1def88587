import type { Response } from 'express';
import {
  allocationDto,
  confirmUnblindingBody,
  emergencyOpeningDto,
  signedReasonBody,
  openedAllocationDto,
  participantDto,
  sealAllocationBody,
  unblindingDto,
  worklistItemDto,
  type ConfirmUnblindingBody,
  type SignedReasonBody,
  type SealAllocationBody,
} from '#schemas/api/participants.ts';
import type { Deps } from '#backend/http/deps.ts';
import { listOf, pageQuery } from '#backend/http/list.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { allocationOverview, listWorklist, openAllocation } from './allocation.queries.ts';
import { assignAllocation } from './assign-allocation.ts';
import { openInEmergency } from './emergency-opening.ts';
import { presentParticipant } from './participant.presenter.ts';
import { sealAllocation } from './seal-allocation.ts';
import { confirmUnblinding, readUnblinding, requestUnblinding } from './unblinding.service.ts';

const study = '/studies/:studyCode';
const nothing = { type: 'object', additionalProperties: false } as const;

/** The sealed list, places given from it, and the ways in which it is opened. */
export function declareAllocationRoutes({ route }: RouteTable, { orm: { em }, settings }: Deps): void {
  route({
    method: 'get',
    path: `${study}/allocation`,
    summary: 'The sealed allocation list: when, its digest, places used',
    gate: ['read', 'AllocationList'],
    responds: { status: 200, body: allocationDto },
    acts: null,
    handler: async (_request, response) => {
      response.json(await allocationOverview(em));
    },
  });

  route({
    method: 'post',
    path: `${study}/allocation`,
    summary: 'Make and seal the allocation list',
    gate: ['seal', 'AllocationList'],
    body: sealAllocationBody,
    responds: { status: 201, body: allocationDto },
    acts: ['allocation-sealed'],
    handler: async (request, response) => {
      await sealAllocation(em, settings.identity, request.body as SealAllocationBody);
      response.status(201).json(await allocationOverview(em.fork()));
    },
  });

  route({
    method: 'get',
    path: `${study}/allocation/worklist`,
    summary: 'What the unblinded technician prepares and takes',
    gate: ['read', 'AllocationSlot'],
    query: { type: 'object', additionalProperties: false, properties: pageQuery },
    responds: { status: 200, body: listOf(worklistItemDto) },
    acts: null,
    handler: async (request, response) => {
      response.json(await listWorklist(em, request.query));
    },
  });

  route({
    method: 'get',
    path: `${study}/allocation/opened`,
    summary: 'The opened list with all it was made from, after unblinding',
    gate: ['read', 'AllocationList'],
    responds: { status: 200, body: openedAllocationDto },
    acts: null,
    handler: async (_request, response) => {
      response.json(await openAllocation(em, settings.identity));
    },
  });

  route({
    method: 'post',
    path: `${study}/participants/:participantId/allocation`,
    summary: 'Give a participant the next place of the list',
    gate: ['read', 'Participant'],
    body: nothing,
    responds: { status: 200, body: participantDto },
    acts: ['allocation-assigned'],
    handler: async (request, response) => {
      const id = idParameter(request, 'participantId');
      const participant = await assignAllocation(em, id, ifMatch(request));
      response.set('ETag', etag(participant.revision)).json(await presentParticipant(em.fork(), participant));
    },
  });

  route({
    method: 'post',
    path: `${study}/participants/:participantId/emergency-opening`,
    summary: "Open one participant's condition in an emergency",
    gate: ['read', 'Participant'],
    body: signedReasonBody,
    responds: { status: 200, body: emergencyOpeningDto },
    acts: ['allocation-opened', 'signature-refused'],
    handler: async (request, response) => {
      const id = idParameter(request, 'participantId');
      response.json(await openInEmergency(em, id, request.body as SignedReasonBody));
    },
  });
}

/** The planned unblinding of a study by two people. */
export function declareUnblindingRoutes({ route }: RouteTable, { orm: { em } }: Deps): void {
  const answer = async (response: Response, status: number): Promise<void> => {
    const present = await readUnblinding(em.fork());
    if (present.request !== null) response.set('ETag', etag(present.request.revision));
    response.status(status).json(present);
  };

  route({
    method: 'get',
    path: `${study}/unblinding`,
    summary: 'How far the unblinding of the study is',
    gate: ['read', 'Unblinding'],
    responds: { status: 200, body: unblindingDto },
    acts: null,
    handler: async (_request, response) => answer(response, 200),
  });

  route({
    method: 'post',
    path: `${study}/unblinding`,
    summary: 'Ask for the unblinding of the locked study',
    gate: ['unblind', 'Study'],
    body: signedReasonBody,
    responds: { status: 201, body: unblindingDto },
    acts: ['unblinding-requested', 'signature-refused'],
    handler: async (request, response) => {
      await requestUnblinding(em, request.body as SignedReasonBody);
      await answer(response, 201);
    },
  });

  route({
    method: 'post',
    path: `${study}/unblinding/confirmation`,
    summary: 'Confirm the unblinding as the second person',
    gate: ['unblind', 'Study'],
    body: confirmUnblindingBody,
    responds: { status: 200, body: unblindingDto },
    acts: ['unblinding-confirmed', 'signature-refused'],
    handler: async (request, response) => {
      await confirmUnblinding(em, ifMatch(request), request.body as ConfirmUnblindingBody);
      await answer(response, 200);
    },
  });
}
