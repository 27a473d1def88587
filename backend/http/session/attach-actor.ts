import { RequestContext, type MikroORM } from '@mikro-orm/postgresql';
import type { RequestHandler } from 'express';
import { noAbility } from '#schemas/abilities/ability.ts';
import { runAs, type Actor } from '../actor.ts';
import { loadActor } from './load-actor.ts';
import { absoluteLimit } from './session.ts';

const nobody: Actor = {
  personId: null,
  name: '',
  membershipId: null,
  role: 'signed-in',
  studyId: null,
  siteIds: null,
  unblinded: false,
  ability: noAbility(),
};

/** Gives each request its own entity manager and its actor. */
export function attachActor(orm: MikroORM): RequestHandler {
  return (request, response, next) => {
    RequestContext.create(orm.em, () => {
      const personId = request.user?.id;
      const { session } = request;
      if (personId === undefined) {
        runAs(nobody, next);
        return;
      }
      if (Date.now() - (session.signedInAt ?? 0) > absoluteLimit) {
        runAs(nobody, next);
        return;
      }
      loadActor(orm.em, personId, session.membershipId ?? null).then((loaded) => {
        if (loaded === null || loaded.sessionEpoch !== session.epoch) {
          runAs(nobody, next);
          return;
        }
        response.locals['studyCode'] = loaded.studyCode;
        runAs(loaded.actor, next);
      }, next);
    });
  };
}
