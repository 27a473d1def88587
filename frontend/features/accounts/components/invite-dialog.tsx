import { useState } from 'react';
import type { PersonDto } from '#schemas/api/people.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { TextField } from '#frontend/components/fields.tsx';
import { useRefusals } from '#frontend/lib/use-refusals.ts';
import { usePeopleActs } from '../api/people.ts';

/** Invites a person by e-mail: who it is has been checked by the administrator (ES-05). */
export function InviteDialog({
  onInvited,
  onClose,
}: {
  onInvited: (person: PersonDto) => void;
  onClose: () => void;
}) {
  const { invite } = usePeopleActs();
  const [name, setName] = useState('');
  const [email, setEmail] = useState('');
  const [refused, run] = useRefusals();
  const handleAct = async () =>
    onInvited(await run(() => invite({ name: name.trim(), email: email.trim() })));

  return (
    <ActDialog
      title="Invite a person"
      act="Send the invitation"
      reasons={false}
      consequences={
        <p>
          A link goes to this address. It works once, for 72 hours; with it the person chooses a password. One
          account belongs to one person for good: check who it is, because signatures will carry this name.
        </p>
      }
      onAct={handleAct}
      onClose={onClose}
    >
      <TextField
        label="Name"
        help="As it will stand on signatures."
        required
        maxLength={120}
        value={name}
        onChange={(event) => setName(event.target.value)}
        error={refused['/name']}
      />
      <TextField
        label="E-mail"
        type="email"
        autoComplete="off"
        required
        value={email}
        onChange={(event) => setEmail(event.target.value)}
        error={refused['/email']}
      />
    </ActDialog>
  );
}
