import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { roleNames } from '#schemas/vocabulary/roles.ts';
import { BandTrace, Mark } from '../components/mark.tsx';
import { nowQuery } from '../lib/now.ts';
import { useMay } from '../lib/session/ability.ts';
import { useSession, type Session } from '../lib/session/session.ts';
import { AccountMenu } from './account-menu.tsx';
import { CodeSearch } from './code-search.tsx';
import { StudyMenu } from './study-menu.tsx';

/** The soot band on top: study, role acted in, search by code, what needs me, account. */
export function Band() {
  const session = useSession();
  const may = useMay();
  const studyCode = session.acting?.studyCode;
  return (
    <header data-ground="band" data-print="hide" className="z-10 bg-band text-chalk sm:sticky sm:top-0">
      <BandTrace />
      <div className="relative mx-auto flex min-h-13 max-w-page flex-wrap items-center gap-x-5 gap-y-1.5 px-6 py-1.5 max-sm:gap-x-3 max-sm:px-4">
        <Link to="/" className="flex items-center gap-2.5 text-lg font-semibold text-chalk no-underline">
          <Mark />
          <span className="max-md:sr-only">Vesselry</span>
        </Link>
        <StudyMenu />
        <span className="text-sm text-chalk-soft max-lg:sr-only">{actingAs(session)}</span>
        <span className="flex-1" />
        {studyCode && may('read', 'Participant') && <CodeSearch studyCode={studyCode} />}
        {studyCode && <NeedCount studyCode={studyCode} />}
        <AccountMenu />
      </div>
    </header>
  );
}

/** "as coordinator, site Upper Scree": the sites where the role is limited to some. */
function actingAs({ acting, memberships }: Session): string {
  if (!acting) return '';
  const { membershipId, role, sites, unblinded } = acting;
  const limited = memberships.find(({ id }) => id === membershipId)?.siteIds != null;
  const names = sites.map(({ name }) => name).join(' and ');
  const where = limited ? `, ${sites.length === 1 ? 'site' : 'sites'} ${names}` : '';
  return `as ${roleNames[role]}${where}${unblinded ? ', unblinded' : ''}`;
}

function NeedCount({ studyCode }: { studyCode: string }) {
  const { data } = useQuery(nowQuery(studyCode));
  if (!data) return null;
  const count = data.items.length;
  return (
    <Link
      to={`/studies/${studyCode}/now`}
      className="rounded-full bg-chalk px-2.5 py-0.5 text-sm font-semibold whitespace-nowrap text-band no-underline hover:underline"
    >
      {count === 0 ? 'nothing needs you' : `${count} ${count === 1 ? 'needs' : 'need'} you`}
    </Link>
  );
}
