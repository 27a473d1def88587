import { useState } from 'react';
import type { PersonDto } from '#schemas/api/people.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { Button } from '#frontend/components/button.tsx';
import { say } from '#frontend/lib/notices.ts';
import { useSession } from '#frontend/lib/session/session.ts';
import { usePeopleActs } from '../api/people.ts';

/** What can be done about an account in its present state. */
export function PersonActs({ person }: { person: PersonDto }) {
  const acts = usePeopleActs();
  const own = useSession().person.id === person.id;
  const [open, setOpen] = useState<'invitation' | 'reset' | 'deactivation'>();
  const close = () => setOpen(undefined);
  return (
    <>
      {person.status === 'invited' && (
        <Button onClick={() => setOpen('invitation')}>Send the invitation again</Button>
      )}
      {person.status === 'active' && <Button onClick={() => setOpen('reset')}>Start a password reset</Button>}
      {person.status !== 'deactivated' && !own && (
        <Button variant="danger" onClick={() => setOpen('deactivation')}>
          Deactivate
        </Button>
      )}
      {open === 'invitation' && (
        <ActDialog
          title={`Invite ${person.name} again`}
          act="Send a new link"
          reasons={false}
          consequences={<p>A new link goes to {person.email}, for 72 hours. The one sent before ends.</p>}
          onAct={async () => {
            await acts.inviteAgain(person.id);
            say(`A new link is on its way to ${person.email}`);
          }}
          onClose={close}
        />
      )}
      {open === 'reset' && (
        <ActDialog
          title={`A new password for ${person.name}`}
          act="Send the link"
          reasons={false}
          consequences={
            <p>
              A link goes to {person.email}, for an hour. The present password holds until a new one is
              chosen; then every session of the account ends. Nobody but its owner ever sees a password.
            </p>
          }
          onAct={async () => {
            await acts.startPasswordReset(person.id);
            say(`A link is on its way to ${person.email}`);
          }}
          onClose={close}
        />
      )}
      {open === 'deactivation' && (
        <ActDialog
          title={`Deactivate ${person.name}`}
          act="Deactivate the account"
          reasons={['left the laboratory', 'account was misused', 'opened by mistake']}
          consequences={
            <p>
              Every session of the account ends now, and its memberships give nothing any more. The name stays
              on what was done with it. The address is never given to another account, and a deactivation is
              not taken back.
            </p>
          }
          onAct={async ({ reason }) => {
            await acts.deactivate(person, reason);
            say(`${person.name} was deactivated`);
          }}
          onClose={close}
        />
      )}
    </>
  );
}
