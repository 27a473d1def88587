import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { InviteDialog } from '../features/accounts/components/invite-dialog.tsx';
import { PeopleTable } from '../features/accounts/components/people-table.tsx';
import { say } from '../lib/notices.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** Everyone with an account; each leads to the memberships held. */
export function PeoplePage() {
  usePageTitle('People');
  const navigate = useNavigate();
  const [inviting, setInviting] = useState(false);
  return (
    <>
      <PageHead
        title="People"
        actions={
          <Button variant="primary" onClick={() => setInviting(true)}>
            Invite a person
          </Button>
        }
      />
      <Card flush>
        <PeopleTable />
      </Card>
      {inviting && (
        <InviteDialog
          onInvited={({ id, email }) => {
            say(`An invitation is on its way to ${email}`);
            void navigate(`/administration/people/${id}`);
          }}
          onClose={() => setInviting(false)}
        />
      )}
    </>
  );
}
