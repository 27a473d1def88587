import { useQuery } from '@tanstack/react-query';
import { Card, PageHead } from '../components/card.tsx';
import { StateMark } from '../components/pen-mark.tsx';
import { Loaded } from '../components/states.tsx';
import { MemberTable } from '../features/accounts/components/member-table.tsx';
import { EnrolmentCard } from '../features/protocol/components/enrolment-card.tsx';
import { studyQuery } from '../features/studies/api/studies.ts';
import { SiteTable } from '../features/studies/components/site-table.tsx';
import { studyMarks } from '../features/studies/model/study-words.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The study itself: what it is called, where it works, whether it enrols, who belongs to it. */
export function StudyPage() {
  const { studyCode } = useActing();
  const may = useMay();
  const query = useQuery(studyQuery(studyCode));
  usePageTitle(`Study · ${studyCode}`);
  return (
    <Loaded query={query}>
      {(study) => (
        <>
          <PageHead title={study.name} note={<StateMark {...studyMarks[study.state]} />} />
          <p className="mb-4 max-w-prose">{study.title}</p>
          <div className="grid items-start gap-4 lg:grid-cols-[minmax(0,1fr)_22rem]">
            <div className="flex flex-col gap-4">
              <Card title="Sites" flush>
                <SiteTable study={study} />
              </Card>
              {may('read', 'Membership') && (
                <Card title="Members" note="Memberships are granted and revoked by the administrator." flush>
                  <MemberTable study={{ code: study.code }} />
                </Card>
              )}
            </div>
            <div className="flex flex-col gap-4">
              <EnrolmentCard studyCode={study.code} studyId={study.id} />
              <Card title="Planned">
                <p>
                  {study.plannedParticipants === 0
                    ? 'The protocol will say how many participants are planned.'
                    : `${study.plannedParticipants} participants, as the newest protocol says.`}
                </p>
              </Card>
            </div>
          </div>
        </>
      )}
    </Loaded>
  );
}
