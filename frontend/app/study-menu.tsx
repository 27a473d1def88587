import { useNavigate } from 'react-router-dom';
import { roleNames } from '#schemas/vocabulary/roles.ts';
import { classNames } from '../components/class-names.ts';
import { Menu, menuLine } from '../components/menu.tsx';
import { say } from '../lib/notices.ts';
import { homeOf } from './home.ts';
import { useActAs } from '../lib/session/sign-in.ts';
import { useSession } from '../lib/session/session.ts';
import { inWords } from '../components/error-summary.tsx';

const look =
  'rounded border border-band-edge bg-band-field px-3 py-1 text-sm text-chalk min-h-8 whitespace-nowrap hover:border-chalk-soft';

/** Switches study and role; the band says which one holds. */
export function StudyMenu() {
  const { acting, memberships } = useSession();
  const actAs = useActAs();
  const navigate = useNavigate();
  const here = acting ? (acting.studyCode ?? 'Administration') : 'Choose a study';
  return (
    <Menu
      label={here}
      name={`Study: ${here}. Change study or role`}
      buttonClassName={classNames(look, acting?.studyCode && 'uppercase')}
    >
      {(close) => (
        <ul>
          {memberships.map((membership) => {
            const { id, studyCode, studyName, role } = membership;
            const current = id === acting?.membershipId;
            return (
              <li key={id}>
                <button
                  type="button"
                  className={menuLine}
                  aria-current={current ? 'true' : undefined}
                  onClick={() => {
                    close();
                    if (current) return;
                    actAs.mutate(id, {
                      onSuccess: () => void navigate(homeOf(membership)),
                      onError: (error) => say(inWords(error).detail, 'asks'),
                    });
                  }}
                >
                  <span className={current ? 'font-semibold text-soot' : undefined}>
                    {studyCode ?? 'Administration'}
                    {current && ' · acting now'}
                  </span>
                  <span className="text-ink-soft">
                    {[roleNames[role], studyName].filter(Boolean).join(' · ')}
                  </span>
                </button>
              </li>
            );
          })}
        </ul>
      )}
    </Menu>
  );
}
