import { cleanup, fireEvent, render, screen, within } from '@testing-library/react';
import { MemoryRouter, useLocation } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { ApiProblem, OfflineError } from '../lib/api.ts';
import { DataTable, type Column } from './data-table.tsx';

interface Row {
  code: string;
  flow: number;
}

const columns: Column<Row>[] = [
  { header: 'participant', cell: ({ code }) => code, sortKey: 'code' },
  {
    header: 'flow',
    unit: 'mL/min/dL',
    numeric: true,
    cell: ({ flow }) => flow.toFixed(2),
    sortKey: 'flow',
    sortValue: ({ flow }) => flow,
  },
  { header: 'remark', optional: true, cell: () => 'remark of the row' },
];
const rows: Row[] = [
  { code: 'UP-2', flow: 2.5 },
  { code: 'UP-1', flow: 10.25 },
  { code: 'UP-3', flow: 1.5 },
];

afterEach(() => {
  cleanup();
  localStorage.clear();
});

function Address() {
  return <output>{useLocation().search}</output>;
}

function show(query: Partial<Parameters<typeof DataTable<Row>>[0]['query']>, address = '/') {
  render(
    <MemoryRouter initialEntries={[address]}>
      <DataTable
        name="participants"
        caption="Participants"
        columns={columns}
        query={{ data: undefined, error: null, refetch: () => undefined, ...query }}
        rowKey={({ code }) => code}
        empty={{ title: 'No participant yet' }}
      />
      <Address />
    </MemoryRouter>,
  );
}

const codes = () =>
  screen
    .getAllByRole('row')
    .slice(1)
    .map((row) => within(row).getAllByRole('cell')[0]?.textContent);

describe('DataTable', () => {
  it('is a real table whose heads carry the unit, in full for the ear', () => {
    show({ data: rows });
    expect(screen.getByRole('columnheader', { name: /flow/ }).textContent).toContain(
      'millilitres per minute per 100',
    );
    expect(codes()).toEqual(['UP-2', 'UP-1', 'UP-3']);
  });

  it('keeps the order in the address and turns it around', () => {
    show({ data: rows });
    fireEvent.click(screen.getByRole('button', { name: /flow/ }));
    expect(codes()).toEqual(['UP-3', 'UP-2', 'UP-1']);
    expect(screen.getByRole('status').textContent).toBe('?sort=flow');
    fireEvent.click(screen.getByRole('button', { name: /flow/ }));
    expect(codes()).toEqual(['UP-1', 'UP-2', 'UP-3']);
    expect(screen.getByRole('status').textContent).toBe('?sort=-flow');
    expect(screen.getByRole('columnheader', { name: /flow/ }).getAttribute('aria-sort')).toBe('descending');
  });

  it('leaves to the server the order of a column that it cannot sort', () => {
    show({ data: rows }, '/?sort=-code');
    expect(codes()).toEqual(['UP-2', 'UP-1', 'UP-3']);
  });

  it('shows and hides columns as the person wants, and never the last one', () => {
    show({ data: rows });
    expect(screen.queryByText('remark of the row')).toBeNull();
    fireEvent.click(screen.getByRole('button', { name: 'Columns' }));
    fireEvent.click(screen.getByRole('checkbox', { name: 'remark' }));
    expect(screen.getAllByText('remark of the row')).toHaveLength(3);
    fireEvent.click(screen.getByRole('checkbox', { name: 'flow' }));
    fireEvent.click(screen.getByRole('checkbox', { name: 'participant' }));
    expect(screen.getByRole('checkbox', { name: 'remark' })).toHaveProperty('disabled', true);
  });

  it('says that nothing is there yet', () => {
    show({ data: [] });
    expect(screen.getByText('No participant yet')).toBeTruthy();
  });

  it('says that it is loading', () => {
    show({});
    expect(screen.getByText('Loading: Participants')).toBeTruthy();
  });

  it('offers to try again when the server is away', () => {
    const refetch = vi.fn();
    show({ error: new OfflineError(undefined), refetch });
    fireEvent.click(screen.getByRole('button', { name: 'Try again' }));
    expect(refetch).toHaveBeenCalled();
  });

  it('tells a role that it may not, without a way to try again', () => {
    show({ error: new ApiProblem(403, { title: 'You may not do this here' }) });
    expect(screen.getByText('Your role does not open this')).toBeTruthy();
    expect(screen.queryByRole('button', { name: 'Try again' })).toBeNull();
  });
});
