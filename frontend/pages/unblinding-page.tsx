import { useQuery } from '@tanstack/react-query';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { Loaded } from '../components/states.tsx';
import { unblindingQuery } from '../features/participants/api/allocation.ts';
import { OpenedList } from '../features/participants/components/opened-list.tsx';
import { UnblindingSteps } from '../features/participants/components/unblinding-steps.tsx';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The planned unblinding of the study: what it does, whose two hands it takes, and afterwards the opened list. */
export function UnblindingPage() {
  const { studyCode, studyName } = useActing();
  usePageTitle(`Unblinding · ${studyCode}`);
  const query = useQuery(unblindingQuery(studyCode));
  return (
    <>
      <Breadcrumbs
        crumbs={[{ label: 'Allocation', to: `/studies/${studyCode}/allocation` }, { label: 'Unblinding' }]}
      />
      <PageHead title="Unblinding of the study" note={studyName} />
      <Loaded query={query} lines={8}>
        {(unblinding) => (
          <div className="flex flex-col gap-4">
            <div className="grid items-start gap-4 lg:grid-cols-[minmax(0,1fr)_22rem]">
              <UnblindingSteps studyCode={studyCode} unblinding={unblinding} />
              <WhatItDoes />
            </div>
            {unblinding.studyState === 'unblinded' && <OpenedList studyCode={studyCode} />}
          </div>
        )}
      </Loaded>
    </>
  );
}

function WhatItDoes() {
  return (
    <Card title="What it does">
      <ul className="flex list-disc flex-col gap-1.5 pl-5 text-sm">
        <li>Every participant’s condition is open to all members of the study.</li>
        <li>
          Values that were hidden because they tell the condition are shown, with all that comes from them.
        </li>
        <li>The sealed list is opened, with the seed it was made from.</li>
        <li>The final cut and the signed plan’s run can be made.</li>
        <li>The data stay locked. It is not taken back.</li>
      </ul>
    </Card>
  );
}
