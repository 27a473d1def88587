import { useQuery } from '@tanstack/react-query';
import { ButtonLink } from '../components/button.tsx';
import { PageHead } from '../components/card.tsx';
import { Loaded } from '../components/states.tsx';
import { allocationQuery } from '../features/participants/api/allocation.ts';
import { SealedList } from '../features/participants/components/sealed-list.tsx';
import { Worklist } from '../features/participants/components/worklist.tsx';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The sealed list and, for those who work unblinded, what to give. */
export function AllocationPage() {
  const { studyCode, studyName } = useActing();
  const may = useMay();
  usePageTitle(`Allocation · ${studyCode}`);
  const query = useQuery(allocationQuery(studyCode));
  return (
    <>
      <PageHead
        title="Allocation"
        note={studyName}
        actions={
          may('read', 'Unblinding') && (
            <ButtonLink to={`/studies/${studyCode}/unblinding`}>Unblinding of the study</ButtonLink>
          )
        }
      />
      <div className="flex flex-col gap-4">
        <Loaded query={query} lines={8}>
          {(allocation) => <SealedList studyCode={studyCode} allocation={allocation} />}
        </Loaded>
        {may('read', 'AllocationSlot') && <Worklist studyCode={studyCode} />}
      </div>
    </>
  );
}
