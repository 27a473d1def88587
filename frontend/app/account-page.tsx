import { useState } from 'react';
import { Button } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { ErrorSummary } from '../components/error-summary.tsx';
import { RadioField } from '../components/fields.tsx';
import { roleNames } from '#schemas/vocabulary/roles.ts';
import { api } from '../lib/api.ts';
import { usePreference } from '../lib/preferences.ts';
import { defaultScheme, schemePreference, type SchemeChoice } from '../lib/scheme.ts';
import { useSession } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';
import { KeySettings } from './key-settings.tsx';

const schemeChoices = [
  { value: 'system', label: 'As this device is set' },
  { value: 'paper', label: 'Paper, light' },
  { value: 'drum', label: 'Drum, dark' },
];

/** What belongs to the person: memberships, keys, looks, sessions. */
export function AccountPage() {
  usePageTitle('Account');
  const { person, memberships } = useSession();
  const [scheme, setScheme] = usePreference<SchemeChoice>(schemePreference, defaultScheme);
  return (
    <>
      <PageHead title={person.name} note={person.email} />
      <div className="grid items-start gap-4 lg:grid-cols-2">
        <Card title="Single-key shortcuts">
          <KeySettings />
        </Card>
        <div className="flex flex-col gap-4">
          <Card title="Looks">
            <RadioField
              name="scheme"
              label="Scheme on this device"
              choices={schemeChoices}
              value={scheme}
              onChange={(value) => setScheme(value as SchemeChoice)}
            />
          </Card>
          <Card title="Sessions">
            <Sessions />
          </Card>
          <Card title="Your roles">
            <ul className="flex flex-col gap-1.5">
              {memberships.map(({ id, studyCode, studyName, role }) => (
                <li key={id}>
                  {studyCode ?? 'Administration'}
                  <span className="text-ink-soft">
                    {' '}
                    · {[roleNames[role], studyName].filter(Boolean).join(', ')}
                  </span>
                </li>
              ))}
            </ul>
          </Card>
        </div>
      </div>
    </>
  );
}

function Sessions() {
  const [error, setError] = useState<unknown>();
  const [busy, setBusy] = useState(false);
  const signOutEverywhere = async () => {
    setBusy(true);
    try {
      await api('/session/sign-out-everywhere', { method: 'POST', body: {} });
      location.assign('/sign-in');
    } catch (problem) {
      setError(problem);
      setBusy(false);
    }
  };
  return (
    <div className="flex flex-col items-start gap-3">
      {error !== undefined && <ErrorSummary error={error} />}
      <p>Lost a tablet, or left one open? This ends every session of yours, the one you use now too.</p>
      <Button variant="danger" busy={busy} onClick={() => void signOutEverywhere()}>
        Sign out everywhere
      </Button>
    </div>
  );
}
