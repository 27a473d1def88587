import { infiniteQueryOptions, queryOptions, useQueryClient } from '@tanstack/react-query';
import type {
  AddSiteBody,
  ChangeSiteBody,
  CreateStudyBody,
  RenameStudyBody,
  SiteDto,
  StudyDto,
} from '#schemas/api/studies.ts';
import { api, queryString } from '#frontend/lib/api.ts';

interface Page<Item> {
  items: Item[];
  nextCursor: string | null;
}

const keys = {
  all: ['studies'] as const,
  list: () => [...keys.all, 'list'] as const,
  every: () => [...keys.all, 'every'] as const,
  one: (place: string) => [...keys.all, 'one', place] as const,
};

const page = async (cursor: string, signal: AbortSignal): Promise<Page<StudyDto>> =>
  (await api<Page<StudyDto>>(`/administration/studies${queryString({ cursor, limit: 200 })}`, { signal }))
    .data;

/** Studies by code, for the administrator. */
export const studiesQuery = infiniteQueryOptions({
  queryKey: keys.list(),
  queryFn: ({ pageParam, signal }) => page(pageParam, signal),
  initialPageParam: '',
  getNextPageParam: ({ nextCursor }) => nextCursor ?? undefined,
});

/** All of them, to choose from. */
export const everyStudyQuery = queryOptions({
  queryKey: keys.every(),
  queryFn: async ({ signal }) => {
    const studies: StudyDto[] = [];
    for (let cursor: string | null = ''; cursor !== null;) {
      const { items, nextCursor }: Page<StudyDto> = await page(cursor, signal);
      studies.push(...items);
      cursor = nextCursor;
    }
    return studies;
  },
});

export const administeredStudyQuery = (id: string) =>
  queryOptions({
    queryKey: keys.one(id),
    queryFn: async ({ signal }) => (await api<StudyDto>(`/administration/studies/${id}`, { signal })).data,
  });

/** The study acted in. */
export const studyQuery = (code: string) =>
  queryOptions({
    queryKey: keys.one(code),
    queryFn: async ({ signal }) => (await api<StudyDto>(`/studies/${code}`, { signal })).data,
  });

/** What the administrator does about studies; each act brings the lists up to date. */
export function useStudyActs() {
  const client = useQueryClient();
  async function send<T>(method: 'POST' | 'PUT', path: string, body: object, ifMatch?: number): Promise<T> {
    const { data } = await api<T>(`/administration${path}`, { method, body, ifMatch });
    void client.invalidateQueries({ queryKey: keys.all });
    return data;
  }
  return {
    create: (body: CreateStudyBody) => send<StudyDto>('POST', '/studies', body),
    rename: ({ id, revision }: StudyDto, body: RenameStudyBody) =>
      send<StudyDto>('PUT', `/studies/${id}`, body, revision),
    addSite: (studyId: string, body: AddSiteBody) => send<SiteDto>('POST', `/studies/${studyId}/sites`, body),
    changeSite: ({ id, revision }: SiteDto, body: ChangeSiteBody) =>
      send<SiteDto>('PUT', `/sites/${id}`, body, revision),
  };
}
