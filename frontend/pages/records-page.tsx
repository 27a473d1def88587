import { useQuery } from '@tanstack/react-query';
import { Loaded } from '../components/states.tsx';
import { lockQuery } from '../features/records/api/lock.ts';
import { LockView } from '../features/records/components/lock-view.tsx';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The lock of the study and what stands against it. */
export function RecordsPage() {
  const { studyCode } = useActing();
  usePageTitle(`Records · ${studyCode}`);
  const query = useQuery(lockQuery(studyCode));
  return (
    <Loaded query={query} lines={8}>
      {(record) => <LockView study={studyCode} record={record} />}
    </Loaded>
  );
}
