import type { Response } from 'express';
import {
  confirmUnblindingBody,
  signedReasonBody,
  unblindingDto,
  type ConfirmUnblindingBody,
  type SignedReasonBody,
} from '#schemas/api/participants.ts';
import type { Deps } from '#backend/http/deps.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { confirmUnblinding, readUnblinding, requestUnblinding } from './unblinding.service.ts';

const study = '/studies/:studyCode';

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
