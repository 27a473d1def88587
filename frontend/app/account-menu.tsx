import { Link } from 'react-router-dom';
import { Menu, menuLine } from '../components/menu.tsx';
import { useSession } from '../lib/session/session.ts';
import { SignOutDialog } from './sign-out-dialog.tsx';
import { useSignOut } from './use-sign-out.ts';

/** The person, their account and the way out. */
export function AccountMenu() {
  const { person } = useSession();
  const signOut = useSignOut();
  return (
    <>
      <Menu
        label={person.name}
        name={`Account of ${person.name}`}
        align="right"
        buttonClassName="min-h-8 rounded px-1 text-sm whitespace-nowrap text-chalk hover:underline"
      >
        {(close) => (
          <>
            <p className="px-2.5 py-1.5 text-sm text-ink-soft">{person.email}</p>
            <Link to="/account" className={menuLine} onClick={close}>
              Account, keys and looks
            </Link>
            <Link to="/help" className={menuLine} onClick={close}>
              Help
            </Link>
            <button
              type="button"
              className={menuLine}
              onClick={() => {
                close();
                signOut.ask();
              }}
            >
              Sign out
            </button>
          </>
        )}
      </Menu>
      <SignOutDialog {...signOut} />
    </>
  );
}
