import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { ExportDto } from '#schemas/api/exports.ts';
import { DataTable, type Column } from '../../../components/data-table.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { useZone } from '../../../lib/session/session.ts';
import { exportsQuery } from '../api/exports.ts';
import { exportLook } from '../model/export-look.ts';

/** The register of exports: what was asked for, decided, and left. */
export function ExportTable({ study }: { study: string }) {
  const query = useQuery(exportsQuery(study));
  const zone = useZone();
  const columns: Column<ExportDto>[] = [
    {
      header: 'Export',
      cell: ({ id, number }) => (
        <Link to={`/studies/${study}/exports/${id}`} className="font-semibold">
          Export {number}
        </Link>
      ),
    },
    { header: 'Of', cell: ({ report }) => `run ${report.runNumber}` },
    { header: 'Purpose', cell: ({ purpose }) => <span className="line-clamp-2">{purpose}</span> },
    { header: 'State', cell: (row) => <StateMark {...exportLook(row)} /> },
    {
      header: 'Requested',
      cell: ({ requestedBy, requestedAt }) => `${requestedBy}, ${formatMoment(requestedAt, zone)}`,
    },
    {
      header: 'Decided',
      cell: ({ decidedBy, decidedAt }) =>
        decidedAt === null ? '' : `${decidedBy ?? ''}, ${formatMoment(decidedAt, zone)}`,
    },
  ];
  return (
    <DataTable
      caption="Exports"
      captionHidden
      name="exports"
      columns={columns}
      query={query}
      rowKey={({ id }) => id}
      empty={{
        title: 'Nothing was exported yet',
        children: <p>A statistician requests the export of a finished run on a final cut.</p>,
      }}
    />
  );
}
