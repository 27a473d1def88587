import { Link } from 'react-router-dom';
import type { QueryDto, QueryMessageDto } from '#schemas/api/monitoring.ts';
import { Card, PageHead } from '../../../components/card.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { useZone } from '../../../lib/session/session.ts';
import { aboutQuery, queryLooks } from '../model/field-words.ts';
import { QueryAnswer } from './query-answer.tsx';

const messageWords: Record<QueryMessageDto['kind'], string> = {
  asked: 'asked',
  replied: 'replied',
  settled: 'settled it',
  reopened: 'opened it again',
};

/** A query from its question to its settlement, and what may be written next. */
export function QueryThread({ study, query }: { study: string; query: QueryDto }) {
  const zone = useZone();
  const days = query.ageDays === 1 ? '1 day' : `${query.ageDays} days`;
  return (
    <>
      <PageHead
        title={`${query.participantCode} · ${aboutQuery(query)}`}
        note={`for the ${query.performedBy.replaceAll('-', ' ')} · open since ${formatMoment(query.openedAt, zone)}, ${days}`}
        actions={
          query.visitId !== null ? (
            <Link to={`/studies/${study}/visits/${query.visitId}`}>To the visit</Link>
          ) : undefined
        }
      />
      <div className="mb-3">
        <StateMark {...queryLooks[query.state]} />
      </div>
      <div className="flex max-w-3xl flex-col gap-4">
        <Card title="Thread">
          <ol className="flex flex-col gap-4">
            {query.messages.map(({ author, kind, text, at }) => (
              <li key={at + kind} className="border-l-3 border-rule pl-3">
                <p className="text-sm text-ink-soft">
                  {query.checkId !== null && kind === 'asked' ? `Check ${query.checkId}, ` : ''}
                  {author} {messageWords[kind]}, <time dateTime={at}>{formatMoment(at, zone)}</time>
                </p>
                <p className="whitespace-pre-wrap">{text}</p>
              </li>
            ))}
          </ol>
        </Card>
        <QueryAnswer study={study} query={query} />
      </div>
    </>
  );
}
