import type { EntityManager } from '@mikro-orm/postgresql';
import { randomUUID } from 'node:crypto';
import { act } from '#backend/database/act.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { invalidBody, notFound, Problem, stateForbids } from '#backend/http/problem.ts';
import { SiteSchema, type Site } from './site.entity.ts';
import { assertStudyOpen } from './study-open.ts';
import { StudySchema, type Study } from './study.entity.ts';

export interface NewStudy {
  /** Lower case; stands in every address of the study and never changes. */
  code: string;
  name: string;
  title: string;
}

export interface NewSite {
  /** Two capital letters; the beginning of its participants' codes. */
  code: string;
  name: string;
  /** IANA zone. */
  timeZone: string;
}

/** Makes a study, in the state setting-up; its own chain begins with this act. */
export function createStudy(em: EntityManager, { code, name, title }: NewStudy): Promise<Study> {
  const id = randomUUID();
  return act(em, { kind: 'study-created', subject: { type: 'study', id }, studyId: id }, async (tx) => {
    if ((await tx.count(StudySchema, { code })) > 0)
      throw taken('/code', 'is the code of another study; choose one');
    return tx.create(StudySchema, { id, code, name, title });
  });
}

/** Changes how a study is called; its code stays. */
export const renameStudy = (
  em: EntityManager,
  studyId: string,
  seenRevision: number,
  { name, title, reason }: Pick<NewStudy, 'name' | 'title'> & { reason: string },
): Promise<Study> =>
  act(em, { kind: 'study-changed', subject: { type: 'study', id: studyId }, reason, studyId }, async (tx) => {
    await assertStudyOpen(tx, studyId);
    const study = await tx.findOneOrFail(StudySchema, studyId);
    assertRevision(study, seenRevision);
    study.name = name;
    study.title = title;
    return study;
  });

/** Adds a site; the protocol then says whether the study works there. */
export const addSite = (
  em: EntityManager,
  studyId: string,
  { code, name, timeZone }: NewSite,
): Promise<Site> =>
  act(em, { kind: 'site-added', subject: (site: Site) => aboutSite(site), studyId }, async (tx) => {
    await assertStudyOpen(tx, studyId);
    assertTimeZone(timeZone);
    if ((await tx.count(SiteSchema, { studyId, code })) > 0)
      throw taken('/code', 'is a site of this study already');
    return tx.create(SiteSchema, { studyId, code, name, timeZone });
  });

/**
 * Changes a site's name, and its time zone while the study is being set up: afterwards times were taken there,
 * and a moved zone would show them as others.
 */
export async function changeSite(
  em: EntityManager,
  siteId: string,
  seenRevision: number,
  { name, timeZone, reason }: Omit<NewSite, 'code'> & { reason: string },
): Promise<Site> {
  const { studyId } = await em.findOneOrFail(SiteSchema, siteId, {
    failHandler: () => notFound('This site'),
  });
  const about = { kind: 'study-changed', subject: { type: 'site', id: siteId, siteId }, reason, studyId };
  return act(em, about, async (tx) => {
    const state = await assertStudyOpen(tx, studyId);
    const site = await tx.findOneOrFail(SiteSchema, siteId);
    assertRevision(site, seenRevision);
    assertTimeZone(timeZone);
    if (timeZone !== site.timeZone && state !== 'setting-up') {
      throw stateForbids('The study has begun: a site keeps its time zone, because times were taken in it.');
    }
    site.name = name;
    site.timeZone = timeZone;
    return site;
  });
}

const aboutSite = ({ id }: Site) => ({ type: 'site', id, siteId: id });

const taken = (pointer: string, detail: string): Problem =>
  new Problem(409, 'already-exists', `This ${detail}.`, [{ pointer, detail }]);

function assertTimeZone(timeZone: string): void {
  if (isTimeZone(timeZone)) return;
  throw invalidBody([{ pointer: '/timeZone', detail: 'is not an IANA time zone, such as America/La_Paz' }]);
}

/** A name of the zone data; a bare offset such as `-04:00` knows no summer time and is none. */
function isTimeZone(name: string): boolean {
  if (!/^[A-Za-z]/.test(name)) return false;
  try {
    new Intl.DateTimeFormat('en', { timeZone: name });
    return true;
  } catch {
    return false;
  }
}
