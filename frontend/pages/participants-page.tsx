import { ButtonLink } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import {
  ParticipantFilters,
  useParticipantFilters,
} from '../features/participants/components/participant-filters.tsx';
import { ParticipantTable } from '../features/participants/components/participant-table.tsx';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** Participants by code; who they are is not in the list. */
export function ParticipantsPage() {
  const { studyCode, studyName } = useActing();
  const may = useMay();
  usePageTitle(`Participants · ${studyCode}`);
  const filters = useParticipantFilters();
  const { site, state, code } = filters;
  return (
    <>
      <PageHead
        title="Participants"
        note={studyName}
        actions={
          may('create', 'Participant') && (
            <ButtonLink to={`/studies/${studyCode}/participants/enrolment`} variant="primary">
              Enrol a participant
            </ButtonLink>
          )
        }
      />
      <Card flush>
        <ParticipantFilters {...filters} />
        <ParticipantTable studyCode={studyCode} filters={{ site, state, code }} />
      </Card>
    </>
  );
}
