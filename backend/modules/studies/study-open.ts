import type { EntityManager } from '@mikro-orm/postgresql';
import type { StudyState } from '#schemas/vocabulary/states.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { notFound, Problem } from '#backend/http/problem.ts';

/**
 * Call it first in every act that writes study data: after it the study stays open until the act commits.
 * The row is taken for share, so that a lock waits for running acts and no act passes a lock (LK-01, LK-04).
 * @throws Problem 409 `study-locked`
 */
export async function assertStudyOpen(tx: EntityManager, studyId = currentStudyId()): Promise<StudyState> {
  if (!tx.isInTransaction()) throw new Error('assertStudyOpen belongs inside an act.');
  const [study] = await tx.execute<{ state: StudyState }[]>(
    'select state from study where id = ? for share',
    [studyId],
  );
  if (study === undefined) throw notFound('This study');
  if (study.state === 'locked' || study.state === 'unblinded') {
    throw new Problem(409, 'study-locked', 'The study is locked: nothing in it can be changed any more.');
  }
  return study.state;
}
