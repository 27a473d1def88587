import { useQuery } from '@tanstack/react-query';
import type { LiveQuantityDto } from '#schemas/api/capture.ts';
import { HiddenValue } from '../../../components/pen-mark.tsx';
import { Quantity } from '../../../components/quantity.tsx';
import { Loaded } from '../../../components/states.tsx';
import { groupBy } from '../../../lib/group-by.ts';
import { formatNumber } from '../../../lib/format/numbers.ts';
import { useActing } from '../../../lib/session/session.ts';
import { liveQuery } from '../api/visits.ts';

/** What the visit measures so far, by time point, with the visit before beside it; hidden values in their place. */
export function LiveColumn({ study, visitId }: { study: string; visitId: string }) {
  const { unblinded } = useActing();
  const query = useQuery(liveQuery(study, visitId));
  return (
    <aside aria-labelledby="live-title" className="rounded-md border border-rule bg-paper p-4">
      <h2 id="live-title" className="text-base">
        As you go
      </h2>
      {!unblinded && (
        <p className="text-sm text-ink-soft">
          You are blinded in this study: what would tell the condition is hidden.
        </p>
      )}
      <Loaded query={query} lines={6}>
        {(rows) =>
          rows.length === 0 ? (
            <p className="text-sm text-ink-soft">The protocol takes no measures from this visit.</p>
          ) : (
            [...groupBy(rows, ({ timePoint }) => timePoint)].map(([timePoint, group]) => (
              <section key={timePoint} aria-label={timePoint} className="mt-3 border-t border-rule-soft pt-2">
                <h3 className="text-sm font-semibold text-ink-soft">{timePoint.replaceAll('-', ' ')}</h3>
                <dl>
                  {group.map((row) => (
                    <LiveRow key={row.key} row={row} />
                  ))}
                </dl>
              </section>
            ))
          )
        }
      </Loaded>
    </aside>
  );
}

function LiveRow({ row }: { row: LiveQuantityDto }) {
  const { label, value, unit, hidden, waiting, previous, cautions } = row;
  return (
    <div className="mt-2">
      <dt className="text-sm text-ink-soft">{label}</dt>
      <dd>
        {hidden && <HiddenValue />}
        {value !== undefined && <Quantity written={formatNumber(value)} unit={unit} large />}
        {waiting !== undefined && <span className="text-sm text-ink-soft">{waiting}</span>}
        {previous !== undefined && (
          <span className="block text-sm text-ink-soft">
            visit before: <Quantity written={formatNumber(previous)} unit={unit} />
          </span>
        )}
        {cautions?.map(({ code, message }) => (
          <span key={code} className="block text-sm text-straw">
            {message}
          </span>
        ))}
      </dd>
    </div>
  );
}
