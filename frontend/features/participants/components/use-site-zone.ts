import { useActing } from '#frontend/lib/session/session.ts';

/** The zone of a participant's site, in which its days are counted. */
export function useSiteZone(siteId: string): string | undefined {
  return useActing().sites.find(({ id }) => id === siteId)?.timeZone;
}
