import type { TrailEventDto } from '#schemas/api/records.ts';
import { Button } from '../../../components/button.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { useZone } from '../../../lib/session/session.ts';
import { TrailValueText } from './trail-value.tsx';

interface TrailEventProps {
  event: TrailEventDto;
  /** Shows only what was done to the same thing. */
  onSubject: (subject: string) => void;
}

/** One event; it opens to the values before and after, the reason, and the hash. */
export function TrailEvent({ event, onSubject }: TrailEventProps) {
  const zone = useZone();
  const { sequence, at, actor, role, words, participantCode, siteCode, reason, changes } = event;
  const places = [participantCode, siteCode].filter((place) => place !== null).join(', ');
  return (
    <li className="border-b border-rule-soft">
      <details>
        <summary className="flex cursor-pointer flex-wrap items-baseline gap-x-4 gap-y-1 px-4 py-2">
          <span className="w-16 shrink-0 numeric text-sm text-ink-soft">
            <span className="sr-only">No. </span>
            {sequence}
          </span>
          <time dateTime={at} className="shrink-0 text-sm">
            {formatMoment(at, zone, { seconds: true })}
          </time>
          <span className="min-w-0 flex-1 basis-72">
            <strong className="font-semibold">{actor}</strong>{' '}
            <span className="text-sm text-ink-soft">({role.replaceAll('-', ' ')})</span> {words}
          </span>
          {places !== '' && <span className="text-sm">{places}</span>}
        </summary>
        <div className="flex flex-col gap-3 bg-bone px-4 py-3">
          {reason !== null && (
            <p>
              <span className="text-sm text-ink-soft">Reason: </span>
              {reason}
            </p>
          )}
          {changes.length > 0 && <Changes event={event} />}
          <dl className="grid grid-cols-[auto_1fr] gap-x-3 gap-y-1 text-sm">
            <dt className="text-ink-soft">About</dt>
            <dd className="font-mono text-xs break-all">{event.subject}</dd>
            {event.cause !== null && (
              <>
                <dt className="text-ink-soft">Because of</dt>
                <dd>no. {event.cause}</dd>
              </>
            )}
            <dt className="text-ink-soft">Version</dt>
            <dd>{event.version}</dd>
            <dt className="text-ink-soft">SHA-256</dt>
            <dd className="font-mono text-xs break-all">{event.hash}</dd>
          </dl>
          <div>
            <Button onClick={() => onSubject(event.subject)}>Only what was done to this</Button>
          </div>
        </div>
      </details>
    </li>
  );
}

function Changes({ event: { sequence, subject, changes } }: { event: TrailEventDto }) {
  return (
    <div className="overflow-x-auto">
      <table className="w-full text-sm">
        <caption className="sr-only">What event {sequence} changed</caption>
        <thead>
          <tr className="text-left text-ink-soft">
            {['Field', 'Before', 'After'].map((head) => (
              <th key={head} scope="col" className="border-b px-2 py-1 font-medium">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {changes.map((change) => (
            <tr key={change.subject + change.address} className="align-top">
              <th scope="row" className="border-b border-rule-soft px-2 py-1 text-left font-mono text-xs">
                {change.address}
                {change.subject !== subject && (
                  <span className="block text-ink-soft">{change.subject.split('/')[0]}</span>
                )}
              </th>
              <td className="border-b border-rule-soft px-2 py-1">
                <TrailValueText value={change.before} />
              </td>
              <td className="border-b border-rule-soft px-2 py-1">
                <TrailValueText value={change.after} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
