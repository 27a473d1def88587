import { Navigate, Outlet } from 'react-router-dom';
import { ForbiddenState } from '../components/states.tsx';
import { useSession } from '../lib/session/session.ts';
import { administrationTabs } from './tabs.ts';

/** The administrator's place, outside of any study. */
export function AdministrationLayout() {
  const { acting } = useSession();
  return acting?.role === 'administrator' ? <Outlet /> : <ForbiddenState />;
}

/** `/administration` leads to its first page. */
export function AdministrationIndex() {
  return <Navigate to={administrationTabs[0]!.path} replace />;
}
