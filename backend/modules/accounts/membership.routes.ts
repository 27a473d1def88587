import { reasonBody, type ReasonBody } from '#schemas/api/accounts.ts';
import {
  changeMembershipBody,
  grantMembershipBody,
  heldMembershipDto,
  memberDto,
  type ChangeMembershipBody,
  type GrantMembershipBody,
} from '#schemas/api/people.ts';
import { accessible } from '#backend/database/row-filter.ts';
import type { Deps } from '#backend/http/deps.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { notFound } from '#backend/http/problem.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import type { Response } from 'express';
import { StudySchema } from '../studies/study.entity.ts';
import type { Membership } from './membership.entity.ts';
import { changeMembership, grantMembership, revokeMembership } from './membership.service.ts';
import { presentHeldMembership } from './people.presenter.ts';
import { contextOf, membersOf } from './people.queries.ts';

const membersDto = { type: 'array', items: memberDto } as const;

/** Who may be what in which study: the administrator grants, the investigator sees. */
export function declareMembershipRoutes({ route }: RouteTable, { orm }: Deps): void {
  route({
    method: 'get',
    path: '/studies/:studyCode/members',
    summary: 'Members of the study, present and past',
    gate: ['read', 'Membership'],
    responds: { status: 200, body: membersDto },
    acts: null,
    handler: async (_request, response) => {
      const where = accessible('read', 'Membership');
      response.json(where === null ? [] : await membersOf(orm.em, where));
    },
  });

  route({
    method: 'get',
    path: '/administration/studies/:studyId/members',
    summary: 'Members of a study, for the administrator',
    gate: ['administer', 'Membership'],
    responds: { status: 200, body: membersDto },
    acts: null,
    handler: async (request, response) => {
      response.json(await membersOf(orm.em, { studyId: idParameter(request, 'studyId') }));
    },
  });

  route({
    method: 'post',
    path: '/memberships',
    summary: 'Give a person a role in a study, or make an administrator',
    gate: ['create', 'Membership'],
    body: grantMembershipBody,
    responds: { status: 201, body: heldMembershipDto },
    acts: ['membership-granted'],
    handler: async (request, response) => {
      const { studyCode, ...wanted } = request.body as GrantMembershipBody;
      const granted = await grantMembership(orm.em, { ...wanted, studyId: await studyIdOf(studyCode) });
      await answer(response.status(201), granted);
    },
  });

  route({
    method: 'put',
    path: '/memberships/:membershipId',
    summary: 'Change the sites or the blinding of a membership',
    gate: ['update', 'Membership'],
    body: changeMembershipBody,
    responds: { status: 200, body: heldMembershipDto },
    acts: ['membership-changed'],
    handler: async (request, response) => {
      const id = idParameter(request, 'membershipId');
      await answer(
        response,
        await changeMembership(orm.em, id, ifMatch(request), request.body as ChangeMembershipBody),
      );
    },
  });

  route({
    method: 'post',
    path: '/memberships/:membershipId/revocation',
    summary: 'End a membership; what it allowed is gone at once',
    gate: ['update', 'Membership'],
    body: reasonBody,
    responds: { status: 200, body: heldMembershipDto },
    acts: ['membership-revoked'],
    handler: async (request, response) => {
      const id = idParameter(request, 'membershipId');
      await answer(
        response,
        await revokeMembership(orm.em, id, ifMatch(request), request.body as ReasonBody),
      );
    },
  });

  async function studyIdOf(code: string | null): Promise<string | null> {
    if (code === null) return null;
    const study = await orm.em.findOne(StudySchema, { code });
    if (study === null) throw notFound('This study');
    return study.id;
  }

  async function answer(response: Response, membership: Membership): Promise<void> {
    const presented = presentHeldMembership(membership, await contextOf(orm.em, [membership]));
    response.set('ETag', etag(membership.revision)).json(presented);
  }
}
