import { queryStates } from '#schemas/vocabulary/states.ts';
import { Card, PageHead } from '../components/card.tsx';
import { SelectField } from '../components/fields.tsx';
import { QueryList } from '../features/monitoring/components/query-list.tsx';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';
import { useUrlState } from '../lib/use-url-state.ts';

/** The queries of the study, the oldest first. */
export function QueriesPage() {
  const { studyCode } = useActing();
  usePageTitle(`Queries · ${studyCode}`);
  const [state, setState] = useUrlState('state');
  return (
    <>
      <PageHead title="Queries" note="the oldest first" />
      <Card flush>
        <div className="p-4">
          <SelectField
            label="State"
            className="max-w-60"
            value={state}
            onChange={(event) => setState(event.target.value)}
            choices={[{ value: '', label: 'Any' }, ...queryStates.map((value) => ({ value, label: value }))]}
          />
        </div>
        <QueryList study={studyCode} state={state} />
      </Card>
    </>
  );
}
