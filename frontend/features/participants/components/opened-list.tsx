import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import {
  verifyAllocation,
  type AllocationVerdict,
  type OpenedAllocation,
} from '#schemas/participants/verify-allocation.ts';
import { Button } from '#frontend/components/button.tsx';
import { Card } from '#frontend/components/card.tsx';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { Loaded } from '#frontend/components/states.tsx';
import { openedQuery } from '../api/allocation.ts';

type Place = OpenedAllocation['list'][number];

const columns: Column<Place>[] = [
  {
    header: 'Site',
    cell: ({ stratum }) => (stratum === 'all' ? 'all sites' : stratum),
    sortKey: 'site',
    sortValue: ({ stratum }) => stratum,
  },
  {
    header: 'Place',
    numeric: true,
    cell: ({ position }) => position,
    sortKey: 'place',
    sortValue: ({ position }) => position,
  },
  {
    header: 'Sequence',
    cell: ({ sequence }) => sequence,
    sortKey: 'sequence',
    sortValue: ({ sequence }) => sequence,
  },
];

/** The list after unblinding, and its proof: checked here, in the browser, without trusting the server (RB-12). */
export function OpenedList({ studyCode }: { studyCode: string }) {
  const query = useQuery(openedQuery(studyCode));
  return (
    <Loaded query={query} lines={8}>
      {(opened) => (
        <div className="grid items-start gap-4 lg:grid-cols-2">
          <Proof opened={opened} />
          <Card flush>
            <DataTable
              caption="The opened list"
              columns={columns}
              query={{ data: opened.list, error: null, refetch: query.refetch }}
              rowKey={({ stratum, position }) => `${stratum} ${position}`}
              empty={{ title: 'The list is empty' }}
            />
          </Card>
        </div>
      )}
    </Loaded>
  );
}

function Proof({ opened }: { opened: OpenedAllocation }) {
  const [verdict, setVerdict] = useState<AllocationVerdict>();
  const facts = [
    ['Digest, published when it was sealed', opened.commitment],
    ['Salt', opened.salt],
    ['Seed', opened.seed],
    ['Block sizes', opened.blockSizes.join(', ')],
  ] as const;
  return (
    <Card title="Was it the list that was sealed?">
      <div className="flex flex-col items-start gap-3">
        <Button variant="primary" onClick={() => void verifyAllocation(opened).then(setVerdict)}>
          Check it in this browser
        </Button>
        <div role="status" className="flex flex-col gap-1">
          {verdict !== undefined && (
            <>
              <Verdict
                holds={verdict.sealHolds}
                yes="List and salt give the digest"
                no="List and salt do not give the digest"
              />
              <Verdict
                holds={verdict.madeFromSeed}
                yes="The seed makes this list: no place was chosen"
                no="The seed makes another list"
              />
            </>
          )}
        </div>
        <dl className="flex flex-col gap-2">
          {facts.map(([label, value]) => (
            <div key={label}>
              <dt className="text-sm text-ink-soft">{label}</dt>
              <dd className="font-mono text-sm break-all">{value}</dd>
            </div>
          ))}
        </dl>
      </div>
    </Card>
  );
}

const Verdict = ({ holds, yes, no }: { holds: boolean; yes: string; no: string }) => (
  <StateMark state={holds ? 'settled' : 'asks'} word={holds ? yes : no} />
);
