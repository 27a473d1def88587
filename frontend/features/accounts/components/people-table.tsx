import { useInfiniteQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { personStates, type PersonDto } from '#schemas/api/people.ts';
import { Button } from '#frontend/components/button.tsx';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { SelectField, TextField } from '#frontend/components/fields.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { useUrlState } from '#frontend/lib/use-url-state.ts';
import { peopleQuery } from '../api/people.ts';
import { membershipInWords, personMarks } from '../model/membership-words.ts';

const columns: Column<PersonDto>[] = [
  {
    header: 'Name',
    cell: ({ id, name }) => (
      <Link to={`/administration/people/${id}`} className="link">
        {name}
      </Link>
    ),
  },
  { header: 'E-mail', cell: ({ email }) => <span className="break-all">{email}</span> },
  { header: 'State', cell: ({ status }) => <StateMark {...personMarks[status]} /> },
  {
    header: 'Memberships',
    cell: ({ memberships }) =>
      memberships.length === 0 ? (
        <span className="text-ink-soft">none</span>
      ) : (
        <ul>
          {memberships.map((membership) => (
            <li key={membership.id}>{membershipInWords(membership)}</li>
          ))}
        </ul>
      ),
  },
];

/** Everyone with an account, by name. */
export function PeopleTable() {
  const [search, setSearch] = useUrlState('search');
  const [status, setStatus] = useUrlState('status');
  const query = useInfiniteQuery(peopleQuery({ search, status }));
  const rows = query.data?.pages.flatMap(({ items }) => items);
  return (
    <>
      <search className="flex flex-wrap items-end gap-4 px-4 pt-3 pb-4">
        <TextField
          label="Name or e-mail holds"
          className="w-60"
          autoComplete="off"
          value={search}
          onChange={(event) => setSearch(event.target.value.slice(0, 120))}
        />
        <SelectField
          label="State"
          className="w-44"
          placeholder="all states"
          choices={personStates.map((value) => ({ value, label: value }))}
          value={status}
          onChange={(event) => setStatus(event.target.value)}
        />
      </search>
      <DataTable
        caption="People"
        captionHidden
        name="people"
        columns={columns}
        query={{ data: rows, error: query.error, refetch: query.refetch }}
        rowKey={({ id }) => id}
        empty={{
          title: search || status ? 'Nobody fits these filters' : 'Nobody has an account yet',
          children: <p>{search || status ? 'Widen them.' : 'Invite the first person.'}</p>,
        }}
      />
      {query.hasNextPage && (
        <div className="border-t px-4 py-3">
          <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
            Show more
          </Button>
        </div>
      )}
    </>
  );
}
