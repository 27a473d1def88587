import { infiniteQueryOptions, queryOptions, useMutation } from '@tanstack/react-query';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import type { TrailEventDto } from '#schemas/api/records.ts';
import { api, queryString } from '../../../lib/api.ts';

export interface TrailFilter {
  kind?: string | undefined;
  participant?: string | undefined;
  subject?: string | undefined;
  from?: string | undefined;
  to?: string | undefined;
}

/** The study's trail; the system's where there is no study. */
const pathOf = (study: string | null): string =>
  study === null ? '/audit-events' : `/studies/${study}/audit-events`;

export const trailQuery = (study: string | null, filter: TrailFilter) =>
  infiniteQueryOptions({
    queryKey: ['trail', study, filter],
    queryFn: async ({ pageParam, signal }) =>
      (
        await api<{ items: TrailEventDto[]; nextCursor: string | null }>(
          pathOf(study) + queryString({ ...filter, cursor: pageParam, limit: 50 }),
          { signal },
        )
      ).data,
    initialPageParam: '',
    getNextPageParam: ({ nextCursor }) => nextCursor ?? undefined,
  });

/** The id behind a participant's code, which is what the trail is asked by. */
export const participantIdQuery = (study: string, code: string) =>
  queryOptions({
    queryKey: ['participant-id', study, code],
    queryFn: async ({ signal }) =>
      (
        await api<ParticipantDto>(`/studies/${study}/participants/by-code/${encodeURIComponent(code)}`, {
          signal,
        })
      ).data.id,
    staleTime: Infinity,
  });

interface ChainCheck {
  ok: boolean;
  events: number;
  head: { sequence: number; hash: string } | null;
  findings: { sequence: number | null; message: string }[];
}

/** Follows the chain when asked; each time anew, for what holds now. */
export const useCheckChain = (study: string | null) =>
  useMutation({ mutationFn: async () => (await api<ChainCheck>(`${pathOf(study)}/check`)).data });
