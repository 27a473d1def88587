import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { MemberDto } from '#schemas/api/people.ts';
import { roleNames, roles } from '#schemas/vocabulary/roles.ts';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { membersQuery } from '../api/people.ts';
import { membershipMarks, sitesInWords } from '../model/membership-words.ts';

const columns = (linked: boolean): Column<MemberDto>[] => [
  {
    header: 'Name',
    cell: ({ name, personId }) =>
      linked ? (
        <Link to={`/administration/people/${personId}`} className="link">
          {name}
        </Link>
      ) : (
        name
      ),
    sortKey: 'name',
    sortValue: ({ name }) => name,
  },
  {
    header: 'Role',
    cell: ({ role }) => roleNames[role],
    sortKey: 'role',
    sortValue: ({ role }) => roles.indexOf(role),
  },
  { header: 'Sites', cell: sitesInWords },
  { header: 'Blinding', cell: ({ unblinded }) => (unblinded ? 'unblinded' : 'blinded') },
  { header: 'E-mail', cell: ({ email }) => <span className="break-all">{email}</span> },
  {
    header: 'State',
    cell: ({ status, personStatus }) =>
      status === 'active' && personStatus !== 'active' ? (
        <StateMark state={personStatus === 'invited' ? 'todo' : 'late'} word={`account ${personStatus}`} />
      ) : (
        <StateMark {...membershipMarks[status]} />
      ),
  },
];

/** Who is, and who was, a member of a study; with links to the people for the administrator. */
export function MemberTable({
  study,
  linked = false,
}: {
  study: { code: string } | { id: string };
  linked?: boolean;
}) {
  return (
    <DataTable
      caption="Members"
      captionHidden
      name="members"
      columns={columns(linked)}
      query={useQuery(membersQuery(study))}
      rowKey={({ id }) => id}
      empty={{
        title: 'Nobody is a member yet',
        children: <p>The administrator grants memberships on the page of each person.</p>,
      }}
    />
  );
}
