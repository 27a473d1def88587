import type { EntityManager } from '@mikro-orm/postgresql';
import type { EnrolmentDto } from '#schemas/api/protocol.ts';
import { act } from '#backend/database/act.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { Problem, stateForbids } from '#backend/http/problem.ts';
import { newestInstruments } from '../instruments/index.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema, type Study } from '../studies/study.entity.ts';
import { newestProtocol } from './protocol-draft.service.ts';

/** Whether the study is open for enrolment, and what stands against opening it. */
export async function readEnrolment(em: EntityManager): Promise<EnrolmentDto> {
  const study = await em.findOne(StudySchema, currentStudyId());
  assertReadable('Study', study, 'This study');
  const { state, revision } = study as Study;
  return { state, revision, openPoints: state === 'setting-up' ? await openPoints(em) : [] };
}

/** Opens the study for enrolment: from setting-up to running, once and for all (AC-06). */
export const startEnrolment = (
  em: EntityManager,
  seenRevision: number,
  { reason }: { reason: string },
): Promise<Study> => {
  const subject = { type: 'study', id: currentStudyId() };
  return act(em, { kind: 'enrolment-started', subject, reason }, async (tx) => {
    const study = await tx.findOneOrFail(StudySchema, currentStudyId(), { refresh: true });
    assertRevision(study, seenRevision);
    authorize('open', 'Study', study);
    if (study.state !== 'setting-up') throw stateForbids('The study was opened for enrolment already.');
    const points = await openPoints(tx);
    if (points.length > 0) {
      const errors = points.map((detail) => ({ pointer: '', detail }));
      throw new Problem(409, 'state-forbids', 'The study cannot be opened for enrolment yet.', errors);
    }
    study.state = 'running';
    return study;
  });
};

async function openPoints(em: EntityManager): Promise<string[]> {
  const studyId = currentStudyId();
  const sites = await em.count(SiteSchema, { studyId });
  const instruments = await newestInstruments(em, studyId);
  const protocol = await newestProtocol(em, studyId);
  return [
    ...(sites === 0 ? ['The study has no site yet; the administrator adds it.'] : []),
    ...(instruments.size === 0 ? ['No instrument is published yet.'] : []),
    ...(protocol === null ? ['No protocol is published yet.'] : []),
  ];
}
