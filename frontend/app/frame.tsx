import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useEffect, useMemo, useState } from 'react';
import { Navigate, Outlet, useLocation } from 'react-router-dom';
import { NoticeRegion } from '../components/notice-region.tsx';
import { OfflineBanner } from '../components/offline-banner.tsx';
import { FailedState, Skeleton } from '../components/states.tsx';
import { DeviceStoreContext } from '../lib/device/use-device-store.ts';
import { listenForShortcuts } from '../lib/keyboard/key-map.ts';
import { useShortcut } from '../lib/keyboard/use-shortcut.ts';
import { AbilityContext, abilityFrom } from '../lib/session/ability.ts';
import { SessionContext, sessionQuery, type Session } from '../lib/session/session.ts';
import { Band } from './band.tsx';
import { IdleGuard } from './idle-guard.tsx';
import { KeysDialog } from './keys-dialog.tsx';
import { Page } from './page.tsx';
import { PlaceTabs } from './place-tabs.tsx';
import { SignInAgain } from './sign-in-again.tsx';
import { usePersonsDeviceStore } from './use-persons-device-store.ts';

/**
 * Everything behind sign-in. A session that is lost while a page is open does not take the page away: what was
 * typed stays, and a dialog asks to sign in again (AX-06).
 */
export function Frame() {
  const query = useQuery(sessionQuery);
  const location = useLocation();
  const [last, setLast] = useState<Session>();
  if (query.data && query.data !== last) setLast(query.data);

  if (query.data === undefined) {
    return query.error ? (
      <FailedState error={query.error} onRetry={() => void query.refetch()} />
    ) : (
      <Skeleton />
    );
  }
  const session = query.data ?? last;
  if (!session)
    return <Navigate to="/sign-in" replace state={{ from: location.pathname + location.search }} />;
  return <SignedIn session={session} lost={query.data === null} />;
}

function SignedIn({ session, lost }: { session: Session; lost: boolean }) {
  const ability = useMemo(() => abilityFrom(session.rules), [session.rules]);
  const store = usePersonsDeviceStore(session);
  const [keysShown, setKeysShown] = useState(false);
  useEffect(() => listenForShortcuts(document), []);
  useShortcut({ id: 'keys', keys: '?', label: 'List the keys', group: 'Anywhere' }, () => setKeysShown(true));
  useFreshNow();

  return (
    <SessionContext value={session}>
      <AbilityContext value={ability}>
        <DeviceStoreContext value={store}>
          <a
            href="#main"
            className="absolute left-4 z-30 -translate-y-20 rounded-b bg-paper px-4 py-2 text-venous focus:translate-y-0"
          >
            Skip to the page
          </a>
          <Band />
          <PlaceTabs />
          <OfflineBanner />
          <Page>
            <Outlet />
          </Page>
          <NoticeRegion />
          {keysShown && <KeysDialog onClose={() => setKeysShown(false)} />}
          {lost ? <SignInAgain session={session} /> : <IdleGuard />}
        </DeviceStoreContext>
      </AbilityContext>
    </SessionContext>
  );
}

/** The count in the band follows where the person goes; it is not polled, so an unattended screen falls idle. */
function useFreshNow() {
  const client = useQueryClient();
  const { pathname } = useLocation();
  useEffect(() => void client.invalidateQueries({ queryKey: ['now'] }), [client, pathname]);
}
