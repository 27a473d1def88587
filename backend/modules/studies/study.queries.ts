import type { EntityManager } from '@mikro-orm/postgresql';
import type { SiteDto, StudyDto } from '#schemas/api/studies.ts';
import { fromCursor, pageSize, toCursor } from '#backend/http/list.ts';
import { assertReadable } from '#backend/http/authorize.ts';
import { SiteSchema, type Site } from './site.entity.ts';
import { StudySchema, type Study } from './study.entity.ts';

export const presentSite = ({ id, code, name, timeZone, revision }: Site): SiteDto => ({
  id,
  code,
  name,
  timeZone,
  revision,
});

const presentStudy = (study: Study, sites: readonly Site[]): StudyDto => ({
  id: study.id,
  code: study.code,
  name: study.name,
  title: study.title,
  state: study.state,
  plannedParticipants: study.plannedParticipants,
  revision: study.revision,
  sites: sites.map(presentSite),
});

/** A study with its sites, as far as the actor may know of it. */
export async function readStudy(em: EntityManager, studyId: string): Promise<StudyDto> {
  const study = await em.findOne(StudySchema, studyId);
  assertReadable('Study', study, 'This study');
  const sites = await em.find(SiteSchema, { studyId }, { orderBy: { code: 'asc' } });
  return presentStudy(study as Study, sites);
}

/** Every study by code, a page at a time: for the administrator. */
export async function listStudies(
  em: EntityManager,
  query: { cursor?: string; limit?: string },
): Promise<{ items: StudyDto[]; nextCursor: string | null }> {
  const size = pageSize(query.limit);
  const [after] = (fromCursor(query.cursor, 1) ?? []).map(String);
  const where = after === undefined ? {} : { code: { $gt: after } };
  const found = await em.find(StudySchema, where, { orderBy: { code: 'asc' }, limit: size + 1 });
  const studies = found.slice(0, size);
  const sites = await em.find(
    SiteSchema,
    { studyId: { $in: studies.map(({ id }) => id) } },
    { orderBy: { code: 'asc' } },
  );
  const last = studies.at(-1);
  return {
    items: studies.map((study) =>
      presentStudy(
        study,
        sites.filter(({ studyId }) => studyId === study.id),
      ),
    ),
    nextCursor: found.length > size && last !== undefined ? toCursor([last.code]) : null,
  };
}
