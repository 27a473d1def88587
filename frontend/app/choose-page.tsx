import { useNavigate } from 'react-router-dom';
import { roleNames } from '#schemas/vocabulary/roles.ts';
import { Button } from '../components/button.tsx';
import { PageHead } from '../components/card.tsx';
import { EmptyState, ErrorState } from '../components/states.tsx';
import { useSession, type Membership } from '../lib/session/session.ts';
import { useActAs } from '../lib/session/sign-in.ts';
import { usePageTitle } from '../lib/use-page-title.ts';
import { homeOf } from './home.ts';

/** Study and role, chosen once; the band shows them from then on. */
export function ChoosePage() {
  usePageTitle('Choose a study');
  const { memberships, person } = useSession();
  const actAs = useActAs();
  const navigate = useNavigate();
  const choose = (membership: Membership) =>
    actAs.mutate(membership.id, { onSuccess: () => void navigate(homeOf(membership)) });

  return (
    <>
      <PageHead title="Which study, and as what?" note={person.name} />
      {actAs.error && <ErrorState error={actAs.error} />}
      {memberships.length === 0 && (
        <EmptyState title="You are in no study yet">
          <p>An administrator gives memberships. Ask for one, then sign in again.</p>
        </EmptyState>
      )}
      <ul className="grid gap-4 md:grid-cols-2">
        {memberships.map((membership) => (
          <li
            key={membership.id}
            className="flex flex-wrap items-center gap-3 rounded border bg-paper px-4 py-3"
          >
            <div className="min-w-0 flex-1">
              <h2 className="text-base">{membership.studyCode ?? 'Administration'}</h2>
              {membership.studyName && <p className="text-sm text-ink-soft">{membership.studyName}</p>}
              <p className="text-sm">
                {roleNames[membership.role]}
                {membership.unblinded && ', unblinded'}
              </p>
            </div>
            <Button
              onClick={() => choose(membership)}
              busy={actAs.isPending && actAs.variables === membership.id}
            >
              Open
              <span className="sr-only">
                {membership.studyCode ?? 'Administration'} as {roleNames[membership.role]}
              </span>
            </Button>
          </li>
        ))}
      </ul>
    </>
  );
}
