import { useQuery } from '@tanstack/react-query';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { Loaded } from '#frontend/components/states.tsx';
import { formatMoment } from '#frontend/lib/format/dates.ts';
import { readingsQuery } from '../api/participants.ts';
import { useSiteZone } from './use-site-zone.ts';

/** "Seen by … on …": who has looked, newest first (CP-05). */
export function IdentifiersReadings({
  studyCode,
  participant,
}: {
  studyCode: string;
  participant: ParticipantDto;
}) {
  const query = useQuery(readingsQuery(studyCode, participant.id));
  const zone = useSiteZone(participant.siteId);
  return (
    <div>
      <h3 className="text-sm">Seen by</h3>
      <Loaded query={query} lines={2}>
        {({ items, nextCursor }) => (
          <>
            {items.length === 0 && <p className="text-sm text-ink-soft">Nobody has looked yet.</p>}
            <ul className="text-sm">
              {items.map(({ at, by, role, reason }) => (
                <li key={at + by} className="py-0.5">
                  {by}, {role.replaceAll('-', ' ')} · <time dateTime={at}>{formatMoment(at, zone)}</time>
                  {reason !== null && <span className="text-ink-soft"> · {reason}</span>}
                </li>
              ))}
            </ul>
            {nextCursor !== null && (
              <p className="text-sm text-ink-soft">Earlier looks stand in the trail.</p>
            )}
          </>
        )}
      </Loaded>
    </div>
  );
}
