import { IsolationLevel, type EntityManager } from '@mikro-orm/postgresql';
import { currentActor } from '../http/actor.ts';
import type { IdempotencyKey } from '../http/idempotency.ts';
import { currentAct, withinAct, type ActContext } from './trail/act-context.ts';
import { columnChanges } from './trail/column-changes.ts';
import { recordedValue } from './trail/recorded-value.ts';
import { writeEvent } from './trail/write-event.ts';
import { productVersion } from './version.ts';

/** The chain of what belongs to no study: accounts, sites' people, the system itself. */
export const systemChain = '00000000-0000-0000-0000-000000000000';

export interface Subject {
  type: string;
  id: string;
  participantId?: string | null;
  siteId?: string | null;
}

export interface About<T> {
  /** What was done, from `schemas/vocabulary/act-kinds.ts`. */
  kind: string;
  /** What it was done to; a function when the row is made by the act. */
  subject: Subject | ((result: T) => Subject);
  reason?: string | null;
  /** Sequence of the event that set this one off. */
  cause?: number | null;
  /** The chain; the actor's study unless said otherwise. */
  studyId?: string;
  idempotency?: IdempotencyKey | null;
}

/**
 * The only way to change study data: runs `work` in a READ COMMITTED transaction, flushes, gathers what
 * changed, takes the chain's lock and writes one event as the last statement; act and record stand or
 * fall together (AT-05). Acts do not nest: what belongs to an act is done inside its `work`.
 */
export async function act<T>(
  em: EntityManager,
  about: About<T>,
  work: (tx: EntityManager) => Promise<T>,
): Promise<T> {
  if (currentAct() !== undefined) throw new Error('An act cannot begin inside another.');
  const actor = currentActor();
  const studyId = about.studyId ?? actor.studyId ?? systemChain;
  const context: ActContext = { changeSets: [], changes: [], values: [], revisions: [], sealed: false };
  return withinAct(context, () =>
    em.transactional(
      async (tx) => {
        const result = await work(tx);
        await tx.flush();
        const columns = await columnChanges(tx, studyId, context.changeSets);
        context.values.push(...columns.values);
        const subject = typeof about.subject === 'function' ? about.subject(result) : about.subject;
        const reason = about.reason
          ? recordedValue({
              subjectType: subject.type,
              subjectId: subject.id,
              address: '/reason',
              value: about.reason,
            })
          : null;
        if (reason !== null) context.values.push(reason);
        context.sealed = true;
        await writeEvent(
          tx,
          context,
          {
            study: studyId,
            actor: actor.personId,
            membership: actor.membershipId,
            role: actor.role,
            kind: about.kind,
            subject: `${subject.type}/${subject.id}`,
            participant: subject.participantId ?? null,
            site: subject.siteId ?? null,
            changes: [...context.changes, ...columns.changes],
            reason: reason?.commitment ?? null,
            cause: about.cause ?? null,
            version: productVersion,
          },
          about.idempotency && actor.personId ? { personId: actor.personId, ...about.idempotency } : null,
        );
        return result;
      },
      { isolationLevel: IsolationLevel.READ_COMMITTED },
    ),
  );
}
