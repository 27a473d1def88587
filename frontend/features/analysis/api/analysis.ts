import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { StudyResult } from '#analysis/study/run-study.ts';
import type { StudyPlan } from '#analysis/study/study-plan.ts';
import type { CutDto, PlanDto, PlanVersionDto, ProgressDto, RunDto } from '#schemas/api/analysis.ts';
import { api } from '../../../lib/api.ts';

const keys = {
  plans: (study: string) => ['plans', study] as const,
  plan: (study: string, id: string) => ['plans', study, id] as const,
  versions: (study: string) => ['plan-versions', study] as const,
  cuts: (study: string) => ['cuts', study] as const,
  runs: (study: string) => ['runs', study] as const,
  run: (study: string, id: string) => ['runs', study, id] as const,
};

const get = async <T>(path: string, signal: AbortSignal): Promise<T> => (await api<T>(path, { signal })).data;

export const plansQuery = (study: string) =>
  queryOptions({
    queryKey: keys.plans(study),
    queryFn: ({ signal }) => get<PlanDto[]>(`/studies/${study}/plans`, signal),
  });

export const planQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: keys.plan(study, id),
    queryFn: ({ signal }) => get<PlanDto>(`/studies/${study}/plans/${id}`, signal),
  });

export type SignedPlan = PlanVersionDto & { content: StudyPlan };

export const planVersionsQuery = (study: string) =>
  queryOptions({
    queryKey: keys.versions(study),
    queryFn: ({ signal }) => get<SignedPlan[]>(`/studies/${study}/plan-versions`, signal),
  });

export const cutsQuery = (study: string) =>
  queryOptions({
    queryKey: keys.cuts(study),
    queryFn: ({ signal }) => get<CutDto[]>(`/studies/${study}/cuts`, signal),
  });

export const runsQuery = (study: string) =>
  queryOptions({
    queryKey: keys.runs(study),
    queryFn: ({ signal }) => get<RunDto[]>(`/studies/${study}/runs`, signal),
    // Runs that are under way are looked at again until they end.
    refetchInterval: ({ state }) => (state.data?.some(isUnderWay) ? 1500 : false),
  });

export const isUnderWay = ({ state }: Pick<RunDto, 'state'>): boolean =>
  state === 'waiting' || state === 'running';

export const runQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: keys.run(study, id),
    queryFn: ({ signal }) => get<RunDto>(`/studies/${study}/runs/${id}`, signal),
    refetchInterval: ({ state }) => (state.data && isUnderWay(state.data) ? 1000 : false),
  });

export const resultQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: [...keys.run(study, id), 'result'],
    queryFn: ({ signal }) => get<StudyResult>(`/studies/${study}/runs/${id}/result`, signal),
    staleTime: Infinity,
  });

/** A job a person waits for, asked again until it ends. */
export const jobQuery = (study: string, jobKey: string) =>
  queryOptions({
    queryKey: ['job', study, jobKey],
    queryFn: ({ signal }) => get<ProgressDto>(`/studies/${study}/jobs/${jobKey}`, signal),
    refetchInterval: ({ state }) =>
      state.data?.state === 'queued' || state.data?.state === 'running' || state.data === undefined
        ? 700
        : false,
  });

export function useSavePlan(study: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({
      id,
      revision,
      name,
      content,
    }: {
      id?: string;
      revision?: number;
      name: string;
      content: unknown;
    }) =>
      id === undefined
        ? api<PlanDto>(`/studies/${study}/plans`, { method: 'POST', body: { name, content } })
        : api<PlanDto>(`/studies/${study}/plans/${id}`, {
            method: 'PUT',
            ifMatch: revision,
            body: { name, content },
          }),
    onSuccess: async ({ data }) => {
      client.setQueryData(keys.plan(study, data.id), data);
      await client.invalidateQueries({ queryKey: keys.plans(study) });
    },
  });
}

export function useSignPlan(study: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ id, revision, password }: { id: string; revision: number; password: string }) =>
      api<PlanVersionDto>(`/studies/${study}/plans/${id}/signature`, {
        method: 'POST',
        ifMatch: revision,
        body: { password },
      }),
    onSuccess: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: keys.plans(study) }),
        client.invalidateQueries({ queryKey: keys.versions(study) }),
      ]),
  });
}

export function useRequestCut(study: string) {
  return useMutation({
    mutationFn: (kind: CutDto['kind']) =>
      api<{ jobKey: string }>(`/studies/${study}/cuts`, { method: 'POST', body: { kind } }),
  });
}

export function useRequestRun(study: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: { cutId: string; planVersionId?: string; planDraftId?: string }) =>
      api<RunDto>(`/studies/${study}/runs`, { method: 'POST', body }),
    onSuccess: () => client.invalidateQueries({ queryKey: keys.runs(study) }),
  });
}

export function useCancelJob(study: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (jobKey: string) =>
      api(`/studies/${study}/jobs/${jobKey}/cancellation`, { method: 'POST', body: {} }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['job', study] }),
  });
}
