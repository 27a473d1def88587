import { Navigate } from 'react-router-dom';
import { useSession } from '../lib/session/session.ts';
import { homeOf } from './home.ts';

/** `/` leads where the role begins. */
export function HomePage() {
  return <Navigate to={homeOf(useSession().acting)} replace />;
}
