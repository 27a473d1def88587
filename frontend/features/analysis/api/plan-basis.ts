import { queryOptions } from '@tanstack/react-query';
import type { ProtocolVersionDto, ProtocolVersionSummaryDto } from '#schemas/api/protocol.ts';
import { api } from '../../../lib/api.ts';

/** The newest published protocol, from which a plan begins; `null` before the first is published. */
export const planBasisQuery = (study: string) =>
  queryOptions({
    queryKey: ['protocol', study, 'plan-basis'],
    queryFn: async ({ signal }) => {
      const path = `/studies/${study}/protocol-versions`;
      const { data: versions } = await api<ProtocolVersionSummaryDto[]>(path, { signal });
      const newest = versions.toSorted((one, other) => other.version - one.version)[0];
      if (newest === undefined) return null;
      return (await api<ProtocolVersionDto>(`${path}/${newest.id}`, { signal })).data.content;
    },
  });
