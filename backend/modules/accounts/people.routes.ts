import { invitePersonBody, personDto, personStates, type InvitePersonBody } from '#schemas/api/people.ts';
import { reasonBody, type ReasonBody } from '#schemas/api/accounts.ts';
import type { Deps } from '#backend/http/deps.ts';
import { listOf, pageQuery } from '#backend/http/list.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { listPeople, onePerson } from './people.queries.ts';
import { deactivatePerson, inviteAgain, invitePerson, startPasswordReset } from './people.service.ts';

const peopleQuery = {
  type: 'object',
  additionalProperties: false,
  properties: {
    ...pageQuery,
    search: { type: 'string', maxLength: 120 },
    status: { enum: personStates },
  },
} as const;

/** The administrator's people: invited, helped to a new password, deactivated. */
export function declarePeopleRoutes({ route }: RouteTable, { orm }: Deps): void {
  route({
    method: 'get',
    path: '/people',
    summary: 'People by name, with the memberships they hold',
    gate: ['administer', 'Person'],
    query: peopleQuery,
    responds: { status: 200, body: listOf(personDto) },
    acts: null,
    handler: async (request, response) => {
      response.json(await listPeople(orm.em, request.query));
    },
  });

  route({
    method: 'post',
    path: '/people',
    summary: 'Invite a person by e-mail',
    gate: ['create', 'Person'],
    body: invitePersonBody,
    responds: { status: 201, body: personDto },
    acts: ['person-invited'],
    handler: async (request, response) => {
      const { id } = await invitePerson(orm.em, request.body as InvitePersonBody);
      const person = await onePerson(orm.em, id);
      response.status(201).set('ETag', etag(person.revision)).json(person);
    },
  });

  route({
    method: 'get',
    path: '/people/:personId',
    summary: 'One person with all memberships, those revoked too',
    gate: ['administer', 'Person'],
    responds: { status: 200, body: personDto },
    acts: null,
    handler: async (request, response) => {
      const person = await onePerson(orm.em, idParameter(request, 'personId'));
      response.set('ETag', etag(person.revision)).json(person);
    },
  });

  route({
    method: 'post',
    path: '/people/:personId/invitation',
    summary: 'Send the invitation once more; the older link ends',
    gate: ['update', 'Person'],
    responds: { status: 204, body: null },
    acts: ['person-invited'],
    handler: async (request, response) => {
      await inviteAgain(orm.em, idParameter(request, 'personId'));
      response.status(204).end();
    },
  });

  route({
    method: 'post',
    path: '/people/:personId/password-reset',
    summary: 'Mail this person a link to choose a new password',
    gate: ['update', 'Person'],
    responds: { status: 204, body: null },
    acts: ['password-reset-started'],
    handler: async (request, response) => {
      await startPasswordReset(orm.em, idParameter(request, 'personId'));
      response.status(204).end();
    },
  });

  route({
    method: 'post',
    path: '/people/:personId/deactivation',
    summary: 'Close an account for good; its sessions end at once',
    gate: ['update', 'Person'],
    body: reasonBody,
    responds: { status: 200, body: personDto },
    acts: ['person-deactivated'],
    handler: async (request, response) => {
      const { id } = await deactivatePerson(
        orm.em,
        idParameter(request, 'personId'),
        ifMatch(request),
        request.body as ReasonBody,
      );
      const person = await onePerson(orm.em, id);
      response.set('ETag', etag(person.revision)).json(person);
    },
  });
}
