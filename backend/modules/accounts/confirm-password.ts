import type { EntityManager, Knex } from '@mikro-orm/postgresql';
import { act } from '#backend/database/act.ts';
import { Problem, stateForbids } from '#backend/http/problem.ts';
import { rateLimit, type RateLimit } from '#backend/http/rate-limit.ts';
import { passwordMatches } from './password.ts';
import { PersonSchema, type Person } from './person.entity.ts';

const limits = new WeakMap<Knex, RateLimit>();

/** Five tries in five minutes for each person, counted in PostgreSQL and apart from sign-in (ES-03). */
function limitOf(em: EntityManager): RateLimit {
  const knex = em.getKnex();
  const known = limits.get(knex);
  if (known !== undefined) return known;
  const limit = rateLimit(knex, 'confirm-password', { points: 5, seconds: 300 });
  limits.set(knex, limit);
  return limit;
}

/**
 * Asks for the password once more before something binding is done; call it before the act, never inside.
 * A refused try stands in the trail of the study acted in, and five of them close this door for five minutes.
 *
 * @returns the person, whose name a signature shows
 * @throws Problem 403 `password-wrong` · 429 `try-again-later` · 409 when the declaration was never accepted (ES-05)
 */
export async function confirmPassword(
  em: EntityManager,
  personId: string,
  password: string,
): Promise<Person> {
  const limit = limitOf(em);
  await limit.take(personId);
  const person = await em.findOneOrFail(PersonSchema, personId);
  if (!(await passwordMatches(person.passwordHash, password)) || person.status !== 'active') {
    await act(
      em,
      { kind: 'signature-refused', subject: { type: 'person', id: personId } },
      async () => undefined,
    );
    throw new Problem(403, 'password-wrong', 'The password is not right; nothing was signed.', [
      { pointer: '/password', detail: 'is not right; try again' },
    ]);
  }
  if (person.declarationAcceptedAt == null) {
    throw stateForbids(
      'Accept first that your signature here binds like ink; ask the administrator for a new link.',
    );
  }
  await limit.forget(personId);
  return person;
}
