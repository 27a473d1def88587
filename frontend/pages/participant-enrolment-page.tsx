import { useQuery } from '@tanstack/react-query';
import { useNavigate } from 'react-router-dom';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { Information } from '../components/caution.tsx';
import { ForbiddenState, Loaded } from '../components/states.tsx';
import { allocationQuery } from '../features/participants/api/allocation.ts';
import { EnrolForm } from '../features/participants/components/enrol-form.tsx';
import { say } from '../lib/notices.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** Enrols a participant: the code is made here, the identifiers go into a store of their own. */
export function ParticipantEnrolmentPage() {
  const { studyCode } = useActing();
  const navigate = useNavigate();
  const may = useMay();
  usePageTitle(`Enrolment · ${studyCode}`);
  const query = useQuery(allocationQuery(studyCode));
  const list = `/studies/${studyCode}/participants`;
  if (!may('create', 'Participant')) return <ForbiddenState />;
  return (
    <>
      <Breadcrumbs crumbs={[{ label: 'Participants', to: list }, { label: 'Enrolment' }]} />
      <PageHead title="Enrol a participant" />
      <div className="grid items-start gap-4 lg:grid-cols-[minmax(0,1fr)_22rem]">
        <Card>
          <Loaded query={query}>
            {({ sequences, sealed }) =>
              sequences > 1 && sealed === null ? (
                <Information>
                  The allocation list is not sealed yet. The unblinded technician seals it on the page
                  Allocation; then the first participant can be enrolled.
                </Information>
              ) : (
                <EnrolForm
                  onEnrolled={({ code }) => {
                    say(`Enrolled as ${code}`);
                    void navigate(`${list}/${code}`);
                  }}
                />
              )
            }
          </Loaded>
        </Card>
        <Card title="What happens to a name">
          <div className="flex flex-col gap-2 text-sm">
            <p>
              Name, birth date and contact are encrypted and kept apart from the data. Each look at them is
              written down. They are in no list, export, e-mail or search, and not kept on this device.
            </p>
            <p>From here on the participant is a code. Its last character finds a slip of the pen.</p>
          </div>
        </Card>
      </div>
    </>
  );
}
