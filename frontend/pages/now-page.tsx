import { useQuery } from '@tanstack/react-query';
import { ButtonLink } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { PenMark } from '../components/pen-mark.tsx';
import { EmptyState, Loaded } from '../components/states.tsx';
import { formatAge, formatDate, formatMoment } from '../lib/format/dates.ts';
import { nowQuery, type Now, type NowItem } from '../lib/now.ts';
import { useActing, useZone } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** What needs the person in this role, oldest first, each with its one action; below it the study's figures. */
export function NowPage() {
  const { studyCode, studyName } = useActing();
  const zone = useZone();
  usePageTitle(`Now · ${studyCode}`);
  const query = useQuery(nowQuery(studyCode));
  const moment = formatMoment(new Date().toISOString(), zone);
  return (
    <>
      <PageHead title="What needs you now" note={`${studyName} · ${moment}`} />
      <Loaded query={query} lines={8}>
        {(now) => (
          <div className="grid items-start gap-4 lg:grid-cols-[minmax(0,1fr)_22rem]">
            <Items items={now.items} />
            <Figures figures={now.figures} />
          </div>
        )}
      </Loaded>
    </>
  );
}

function Items({ items }: { items: readonly NowItem[] }) {
  if (items.length === 0) {
    return (
      <Card flush>
        <EmptyState title="Nothing needs you now">
          <p>What is due or asked of you appears here by itself.</p>
        </EmptyState>
      </Card>
    );
  }
  return (
    <Card flush>
      <ul className="divide-y divide-rule-soft">
        {items.map((item, at) => (
          <li
            key={item.href + item.title}
            className="flex flex-wrap items-center gap-x-5 gap-y-2 px-4 py-3.5"
          >
            <span className="flex w-32 items-center gap-1.5 text-sm text-ink-soft">
              <PenMark state="asks" />
              <time dateTime={item.since} title={formatDate(item.since)}>
                {formatAge(item.since)}
              </time>
            </span>
            <div className="min-w-56 flex-1">
              <h2 className="text-base">{item.title}</h2>
              <p className="text-sm text-ink-soft">{item.detail}</p>
            </div>
            <ButtonLink to={item.href} variant={at === 0 ? 'primary' : 'plain'}>
              {item.action}
              <span className="sr-only">: {item.title}</span>
            </ButtonLink>
          </li>
        ))}
      </ul>
    </Card>
  );
}

function Figures({ figures }: Pick<Now, 'figures'>) {
  if (figures.length === 0) return null;
  return (
    <Card title="The study so far" flush>
      <dl className="divide-y divide-rule-soft pt-1">
        {figures.map(({ label, value, note }) => (
          <div key={label} className="grid grid-cols-[1fr_auto] items-baseline gap-x-4 px-4 py-2.5">
            <dt>{label}</dt>
            <dd className="text-xl font-semibold text-soot">{value}</dd>
            <dd className="col-span-2 text-sm text-ink-soft">{note}</dd>
          </div>
        ))}
      </dl>
    </Card>
  );
}
