import { infiniteQueryOptions, queryOptions, useQueryClient } from '@tanstack/react-query';
import type {
  ChangeMembershipBody,
  GrantMembershipBody,
  HeldMembershipDto,
  InvitePersonBody,
  MemberDto,
  PersonDto,
} from '#schemas/api/people.ts';
import { api, queryString } from '#frontend/lib/api.ts';

export interface PeopleFilters {
  search: string;
  status: string;
}

interface Page<Item> {
  items: Item[];
  nextCursor: string | null;
}

const keys = {
  all: ['people'] as const,
  list: (filters: PeopleFilters) => [...keys.all, 'list', filters] as const,
  one: (id: string) => [...keys.all, 'one', id] as const,
  members: (place: string) => [...keys.all, 'members', place] as const,
};

export const peopleQuery = (filters: PeopleFilters) =>
  infiniteQueryOptions({
    queryKey: keys.list(filters),
    queryFn: async ({ pageParam, signal }) =>
      (
        await api<Page<PersonDto>>(`/people${queryString({ ...filters, cursor: pageParam, limit: 100 })}`, {
          signal,
        })
      ).data,
    initialPageParam: '',
    getNextPageParam: ({ nextCursor }) => nextCursor ?? undefined,
  });

export const personQuery = (id: string) =>
  queryOptions({
    queryKey: keys.one(id),
    queryFn: async ({ signal }) => (await api<PersonDto>(`/people/${id}`, { signal })).data,
  });

/** Members of a study as its own members see them, or as the administrator does. */
export const membersQuery = (study: { code: string } | { id: string }) => {
  const path =
    'code' in study ? `/studies/${study.code}/members` : `/administration/studies/${study.id}/members`;
  return queryOptions({
    queryKey: keys.members(path),
    queryFn: async ({ signal }) => (await api<MemberDto[]>(path, { signal })).data,
  });
};

/** What the administrator does about people; each act brings every list up to date. */
export function usePeopleActs() {
  const client = useQueryClient();
  const refresh = () => client.invalidateQueries({ queryKey: keys.all });
  const post = async <T>(path: string, body: object = {}, ifMatch?: number): Promise<T> => {
    const { data } = await api<T>(path, { method: 'POST', body, ifMatch });
    void refresh();
    return data;
  };
  return {
    invite: (body: InvitePersonBody) => post<PersonDto>('/people', body),
    inviteAgain: (id: string) => post<undefined>(`/people/${id}/invitation`),
    startPasswordReset: (id: string) => post<undefined>(`/people/${id}/password-reset`),
    deactivate: ({ id, revision }: PersonDto, reason: string) =>
      post<PersonDto>(`/people/${id}/deactivation`, { reason }, revision),
    grant: (body: GrantMembershipBody) => post<HeldMembershipDto>('/memberships', body),
    change: async ({ id, revision }: HeldMembershipDto, body: ChangeMembershipBody) => {
      await api<HeldMembershipDto>(`/memberships/${id}`, { method: 'PUT', body, ifMatch: revision });
      void refresh();
    },
    revoke: ({ id, revision }: HeldMembershipDto, reason: string) =>
      post<HeldMembershipDto>(`/memberships/${id}/revocation`, { reason }, revision),
  };
}
