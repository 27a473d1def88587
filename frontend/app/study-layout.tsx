import { Outlet, useParams } from 'react-router-dom';
import { roleNames } from '#schemas/vocabulary/roles.ts';
import { Button } from '../components/button.tsx';
import { Card } from '../components/card.tsx';
import { ErrorState, ForbiddenState } from '../components/states.tsx';
import { useActAs } from '../lib/session/sign-in.ts';
import { useSession, type Membership } from '../lib/session/session.ts';

/** The pages of a study, once the person acts in it. A link from a colleague may lead into another one. */
export function StudyLayout() {
  const { studyCode = '' } = useParams();
  const { acting, memberships } = useSession();
  if (acting?.studyCode === studyCode) return <Outlet />;
  const others = memberships.filter((membership) => membership.studyCode === studyCode);
  return (
    <>{others.length > 0 ? <ChooseRole studyCode={studyCode} memberships={others} /> : <ForbiddenState />}</>
  );
}

interface ChooseRoleProps {
  studyCode: string;
  memberships: readonly Membership[];
}

function ChooseRole({ studyCode, memberships }: ChooseRoleProps) {
  const actAs = useActAs();
  return (
    <Card title={`This page belongs to ${studyCode}`}>
      <p>You do not act in this study now. Choose the role in which to open it.</p>
      {actAs.error && <ErrorState error={actAs.error} />}
      <div className="mt-3 flex flex-wrap gap-3">
        {memberships.map(({ id, role }) => (
          <Button key={id} busy={actAs.isPending} onClick={() => actAs.mutate(id)}>
            Act as {roleNames[role]}
          </Button>
        ))}
      </div>
    </Card>
  );
}
