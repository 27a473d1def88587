import { useQuery } from '@tanstack/react-query';
import { visitStates } from '#schemas/vocabulary/states.ts';
import { Card, PageHead } from '../components/card.tsx';
import { SelectField } from '../components/fields.tsx';
import { visitsQuery } from '../features/capture/api/visits.ts';
import { VisitTable } from '../features/capture/components/visit-table.tsx';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';
import { useUrlState } from '../lib/use-url-state.ts';

const day = (offset: number): string => new Date(Date.now() + offset * 86_400_000).toISOString().slice(0, 10);

/** The days a person looks at; each is a window that overlaps them. */
const spans: Record<string, { label: string; from?: string; to?: string }> = {
  today: { label: 'Today', from: day(0), to: day(0) },
  week: { label: 'The next seven days', from: day(0), to: day(7) },
  past: { label: 'Until today', to: day(0) },
  all: { label: 'All' },
};

/** Today's visits, or any others. */
export function VisitsPage() {
  const { studyCode } = useActing();
  usePageTitle(`Visits · ${studyCode}`);
  const [span, setSpan] = useUrlState('days', 'today');
  const [state, setState] = useUrlState('state');
  const { from, to } = spans[span] ?? {};
  const query = useQuery(visitsQuery(studyCode, { from, to, state: state === '' ? undefined : state }));
  return (
    <>
      <PageHead title="Visits" />
      <Card flush>
        <div className="flex flex-wrap gap-4 p-4">
          <SelectField
            label="Days"
            value={span}
            onChange={(event) => setSpan(event.target.value)}
            choices={Object.entries(spans).map(([value, { label }]) => ({ value, label }))}
          />
          <SelectField
            label="State"
            value={state}
            onChange={(event) => setState(event.target.value)}
            choices={[
              { value: '', label: 'Any' },
              ...visitStates.map((value) => ({ value, label: value.replace('-', ' ') })),
            ]}
          />
        </div>
        <VisitTable study={studyCode} query={query} />
      </Card>
    </>
  );
}
