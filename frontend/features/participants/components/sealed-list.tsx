import { useState } from 'react';
import type { AllocationDto } from '#schemas/api/participants.ts';
import { Button } from '#frontend/components/button.tsx';
import { Card } from '#frontend/components/card.tsx';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { formatMoment } from '#frontend/lib/format/dates.ts';
import { useMay } from '#frontend/lib/session/ability.ts';
import { useZone } from '#frontend/lib/session/session.ts';
import { SealDialog } from './seal-dialog.tsx';

type Site = AllocationDto['sites'][number];

const columns: Column<Site>[] = [
  { header: 'Site', cell: ({ siteCode, siteName }) => `${siteCode} · ${siteName}` },
  { header: 'Enrolled', numeric: true, cell: ({ enrolled }) => enrolled },
  { header: 'Places assigned', numeric: true, cell: ({ assigned }) => assigned },
];

/** The sealed list as everybody may know it: since when, its digest, how many places are used. */
export function SealedList({ studyCode, allocation }: { studyCode: string; allocation: AllocationDto }) {
  return (
    <div className="grid items-start gap-4 lg:grid-cols-2">
      <Card title="The list">
        <State studyCode={studyCode} allocation={allocation} />
      </Card>
      <Card flush>
        <DataTable
          caption="Participants and places by site"
          columns={columns}
          query={{ data: allocation.sites, error: null, refetch: () => undefined }}
          rowKey={({ siteCode }) => siteCode}
          empty={{ title: 'The study has no site yet' }}
        />
      </Card>
    </div>
  );
}

function State({ studyCode, allocation }: { studyCode: string; allocation: AllocationDto }) {
  const { sequences, sealed, assigned } = allocation;
  const zone = useZone();
  if (sealed !== null) {
    return (
      <div className="flex flex-col gap-3">
        <StateMark
          state="settled"
          word={`sealed ${formatMoment(sealed.sealedAt, zone)} by ${sealed.sealedBy}`}
          className="whitespace-normal"
        />
        <p>
          {assigned} of {sealed.slots} places assigned.
        </p>
        <div>
          <h3 className="text-sm">Digest</h3>
          <p className="font-mono text-sm break-all">{sealed.commitment}</p>
          <p className="mt-1 text-sm text-ink-soft">
            Write it down where it cannot be changed. After unblinding the list is opened, and this digest
            proves that it is the one that was sealed.
          </p>
        </div>
      </div>
    );
  }
  if (sequences === 0) return <p>No protocol is published yet: the list is made from its sequences.</p>;
  if (sequences === 1)
    return <p>The protocol has one sequence: everybody gets the same, and nothing is allocated.</p>;
  return <Unsealed studyCode={studyCode} allocation={allocation} />;
}

function Unsealed({ studyCode, allocation }: { studyCode: string; allocation: AllocationDto }) {
  const may = useMay();
  const [sealing, setSealing] = useState(false);
  return (
    <div className="flex flex-col items-start gap-3">
      <StateMark state="todo" word="not sealed yet" />
      <p>The list is sealed before the first participant is enrolled, by the unblinded technician.</p>
      {may('seal', 'AllocationList') && (
        <Button variant="primary" onClick={() => setSealing(true)}>
          Make and seal the list
        </Button>
      )}
      {sealing && (
        <SealDialog
          studyCode={studyCode}
          sequences={allocation.sequences}
          sites={allocation.sites.length}
          onClose={() => setSealing(false)}
        />
      )}
    </div>
  );
}
