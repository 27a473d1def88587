import { queryOptions } from '@tanstack/react-query';
import { api } from './api.ts';

/** One thing that needs this person, with its one action. */
export interface NowItem {
  kind: string;
  /** Since when it waits. */
  since: string;
  title: string;
  detail: string;
  href: string;
  /** Label of its action. */
  action: string;
}

export interface Now {
  items: NowItem[];
  figures: { label: string; value: string; note: string }[];
}

/** What needs the person in the role acted in: asked by the band for its count, and by the page *Now*. */
export const nowQuery = (studyCode: string) =>
  queryOptions({
    queryKey: ['now', studyCode],
    queryFn: async ({ signal }) => (await api<Now>(`/studies/${studyCode}/now`, { signal })).data,
  });
