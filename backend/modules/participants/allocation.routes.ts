import {
  allocationDto,
  emergencyOpeningDto,
  signedReasonBody,
  openedAllocationDto,
  participantDto,
  sealAllocationBody,
  worklistItemDto,
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
