import { useState } from 'react';
import type { SiteDto, StudyDto } from '#schemas/api/studies.ts';
import { Button } from '#frontend/components/button.tsx';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { ChangeSiteDialog } from './site-dialogs.tsx';

/** The sites of a study; the administrator may change them while the study is open. */
export function SiteTable({ study, editable = false }: { study: StudyDto; editable?: boolean }) {
  const [changing, setChanging] = useState<SiteDto>();
  const acts: Column<SiteDto> = {
    header: 'Acts',
    cell: (site) => (
      <Button variant="quiet" onClick={() => setChanging(site)}>
        Change
      </Button>
    ),
  };
  const columns: Column<SiteDto>[] = [
    { header: 'Code', cell: ({ code }) => <span className="font-mono">{code}</span> },
    { header: 'Name', cell: ({ name }) => name },
    { header: 'Time zone', cell: ({ timeZone }) => timeZone },
    ...(editable ? [acts] : []),
  ];
  return (
    <>
      <DataTable
        caption="Sites"
        captionHidden
        columns={columns}
        query={{ data: study.sites, error: null, refetch: () => undefined }}
        rowKey={({ id }) => id}
        empty={{
          title: 'No site yet',
          children: <p>The administrator adds the places where visits happen.</p>,
        }}
      />
      {changing && <ChangeSiteDialog study={study} site={changing} onClose={() => setChanging(undefined)} />}
    </>
  );
}
