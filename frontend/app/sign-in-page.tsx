import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, Navigate, useLocation } from 'react-router-dom';
import { Mark } from '../components/mark.tsx';
import { sessionQuery } from '../lib/session/session.ts';
import { statusQuery, type DemoAccount } from '../lib/status.ts';
import { BareLayout } from './bare-layout.tsx';
import { SignInForm } from './sign-in-form.tsx';

/** The way in. A demo system lists its accounts, a real one never does. */
export function SignInPage() {
  const { data: session } = useQuery(sessionQuery);
  const { data: status } = useQuery(statusQuery);
  const from = (useLocation().state as { from?: string } | null)?.from ?? '/';
  const [account, setAccount] = useState<DemoAccount>();
  if (session) return <Navigate to={from} replace />;
  const accounts = status?.demo?.accounts ?? [];
  return (
    <BareLayout title="Sign in" wide={accounts.length > 0}>
      <div
        className={
          accounts.length > 0
            ? 'grid items-start gap-6 md:grid-cols-[minmax(0,20rem)_minmax(0,1fr)]'
            : undefined
        }
      >
        <section className="rounded border bg-paper px-5 py-4">
          <h1 className="mb-3 flex items-center gap-2.5">
            <span className="text-arterial">
              <Mark size={22} />
            </span>
            Sign in
          </h1>
          <SignInForm key={account?.email} email={account?.email ?? ''} password={account?.password ?? ''} />
          <p className="mt-3 text-sm">
            <Link to="/forgotten-password" className="link">
              Forgotten your password?
            </Link>
          </p>
        </section>
        {accounts.length > 0 && (
          <DemoAccounts accounts={accounts} onChoose={setAccount} chosen={account?.email} />
        )}
      </div>
    </BareLayout>
  );
}

interface DemoAccountsProps {
  accounts: readonly DemoAccount[];
  chosen: string | undefined;
  onChoose: (account: DemoAccount) => void;
}

function DemoAccounts({ accounts, chosen, onChoose }: DemoAccountsProps) {
  return (
    <section aria-labelledby="demo-accounts" className="rounded border bg-paper px-5 py-4">
      <h2 id="demo-accounts">Demo accounts</h2>
      <p className="mt-1 text-sm text-ink-soft">
        This system runs on invented studies and people. Choose an account to fill in the form, then sign in.
      </p>
      <ul className="mt-3 grid gap-x-6 gap-y-1 sm:grid-cols-2">
        {accounts.map((account) => (
          <li key={account.email}>
            <button
              type="button"
              aria-pressed={chosen === account.email}
              onClick={() => onChoose(account)}
              className="flex min-h-11 w-full flex-col rounded-sm border border-transparent px-2 py-1.5 text-left text-sm hover:bg-bone aria-pressed:border-venous aria-pressed:bg-venous-wash"
            >
              <span className="text-venous">{account.roles}</span>
              <span className="text-ink-soft">{account.name}</span>
            </button>
          </li>
        ))}
      </ul>
    </section>
  );
}
