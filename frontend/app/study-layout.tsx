import { Suspense } from 'react';
import { Navigate, Outlet, useNavigate, useParams } from 'react-router-dom';
import { roleNames } from '#schemas/vocabulary/roles.ts';
import { Button } from '../components/button.tsx';
import { Card } from '../components/card.tsx';
import { ErrorState, ForbiddenState, Skeleton } from '../components/states.tsx';
import { TabRow } from '../components/tab-row.tsx';
import { useShortcut } from '../lib/keyboard/use-shortcut.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActAs } from '../lib/session/sign-in.ts';
import { useSession, type SessionMembership } from '../lib/session/session.ts';
import { administrationTabs, studyTabs, type Tab } from './tabs.ts';

/** A study: its row of tabs and its pages, once the person acts in it. */
export function StudyLayout() {
  const { studyCode = '' } = useParams();
  const { acting, memberships } = useSession();
  if (acting?.studyCode === studyCode)
    return <Place base={`/studies/${studyCode}`} label={studyCode} tabs={studyTabs} />;
  const others = memberships.filter((membership) => membership.studyCode === studyCode);
  return (
    <Page>
      {others.length > 0 ? <ChooseRole studyCode={studyCode} memberships={others} /> : <ForbiddenState />}
    </Page>
  );
}

/** The administrator's place, outside of any study. */
export function AdministrationLayout() {
  const { acting } = useSession();
  if (acting?.role !== 'administrator')
    return (
      <Page>
        <ForbiddenState />
      </Page>
    );
  return <Place base="/administration" label="Administration" tabs={administrationTabs} />;
}

/** Goes from `/administration` to its first page. */
export function AdministrationIndex() {
  return <Navigate to={administrationTabs[0]!.path} replace />;
}

function Place({ base, label, tabs }: { base: string; label: string; tabs: readonly Tab[] }) {
  const may = useMay();
  const open = tabs.filter(({ ability }) => ability === null || may(...ability));
  const links = open.map((tab) => ({ label: tab.label, to: `${base}/${tab.path}` }));
  return (
    <>
      <TabRow label={label} tabs={[...links, { label: 'Help', to: '/help' }]} />
      {open.map((tab) => (
        <TabKey key={tab.path} tab={tab} base={base} />
      ))}
      <Page>
        <Suspense fallback={<Skeleton />}>
          <Outlet />
        </Suspense>
      </Page>
    </>
  );
}

function TabKey({ tab, base }: { tab: Tab; base: string }) {
  const navigate = useNavigate();
  const { label, path, key } = tab;
  useShortcut(
    { id: `go-${path}`, keys: `g ${key}`, label: `Go to ${label}`, group: 'Go' },
    () => void navigate(`${base}/${path}`),
  );
  return null;
}

/** The page's own part, the target of the skip link. */
export function Page({ children }: { children: React.ReactNode }) {
  return (
    <main id="main" tabIndex={-1} className="page outline-none">
      {children}
    </main>
  );
}

function ChooseRole({
  studyCode,
  memberships,
}: {
  studyCode: string;
  memberships: readonly SessionMembership[];
}) {
  const actAs = useActAs();
  return (
    <Card title={`This page belongs to ${studyCode}`}>
      <p>You act in another study now. Choose the role in which to open it.</p>
      {actAs.error && <ErrorState error={actAs.error} />}
      <div className="mt-3 flex flex-wrap gap-3">
        {memberships.map(({ membershipId, role }) => (
          <Button
            key={membershipId}
            variant="primary"
            busy={actAs.isPending}
            onClick={() => actAs.mutate(membershipId)}
          >
            Act as {roleNames[role]}
          </Button>
        ))}
      </div>
    </Card>
  );
}
