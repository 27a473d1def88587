import { useState } from 'react';
import type { HeldMembershipDto, PersonDto } from '#schemas/api/people.ts';
import type { StudyDto } from '#schemas/api/studies.ts';
import { limitedToSites, roleNames } from '#schemas/vocabulary/roles.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { Button } from '#frontend/components/button.tsx';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { say } from '#frontend/lib/notices.ts';
import { usePeopleActs } from '../api/people.ts';
import { blindingOf, membershipInWords, membershipMarks, sitesInWords } from '../model/membership-words.ts';
import { ChangeMembershipDialog } from './change-membership-dialog.tsx';

interface HeldMembershipsProps {
  person: PersonDto;
  studies: readonly StudyDto[];
}

/** What a person is and was, with what may be changed about it. */
export function HeldMemberships({ person, studies }: HeldMembershipsProps) {
  const { revoke } = usePeopleActs();
  const [open, setOpen] = useState<{ act: 'change' | 'revoke'; membership: HeldMembershipDto }>();
  const columns: Column<HeldMembershipDto>[] = [
    { header: 'Study', cell: ({ studyName }) => studyName ?? 'Administration' },
    { header: 'Role', cell: ({ role }) => roleNames[role] },
    { header: 'Sites', cell: (row) => (row.studyName === null ? '–' : sitesInWords(row)) },
    { header: 'Blinding', cell: blindingInWords },
    { header: 'State', cell: ({ status }) => <StateMark {...membershipMarks[status]} /> },
    {
      header: 'Acts',
      cell: (membership) =>
        membership.status === 'active' &&
        person.status !== 'deactivated' && (
          <span className="flex gap-3">
            {changeable(membership) && (
              <Button variant="quiet" onClick={() => setOpen({ act: 'change', membership })}>
                Change
              </Button>
            )}
            <Button variant="quiet" onClick={() => setOpen({ act: 'revoke', membership })}>
              Revoke
            </Button>
          </span>
        ),
    },
  ];
  return (
    <>
      <DataTable
        caption={`Memberships of ${person.name}`}
        captionHidden
        columns={columns}
        query={{ data: person.memberships, error: null, refetch: () => undefined }}
        rowKey={({ id }) => id}
        empty={{ title: 'No membership yet', children: <p>Without one this person can see nothing.</p> }}
      />
      {open?.act === 'change' && (
        <ChangeMembershipDialog
          personName={person.name}
          membership={open.membership}
          study={studies.find(({ code }) => code === open.membership.studyCode)}
          onChanged={() => say('The membership was changed')}
          onClose={() => setOpen(undefined)}
        />
      )}
      {open?.act === 'revoke' && (
        <ActDialog
          title={`Revoke a membership of ${person.name}`}
          act="Revoke the membership"
          reasons={['leaves the team', 'changes role', 'was granted wrongly']}
          consequences={
            <p>
              {membershipInWords(open.membership)}: what it allows is gone with the person’s next click, open
              pages and waiting downloads included. What was done stays on record under this name.
            </p>
          }
          onAct={async ({ reason }) => {
            await revoke(open.membership, reason);
            say('The membership was revoked');
          }}
          onClose={() => setOpen(undefined)}
        />
      )}
    </>
  );
}

const changeable = ({ role }: HeldMembershipDto): boolean =>
  limitedToSites.includes(role) || blindingOf(role) === null;

const blindingInWords = ({ studyName, unblinded }: HeldMembershipDto): string => {
  if (studyName === null) return '–';
  return unblinded ? 'unblinded' : 'blinded';
};
