import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Loaded } from '../components/states.tsx';
import { exportQuery } from '../features/exports/api/exports.ts';
import { ExportView } from '../features/exports/components/export-view.tsx';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** One export. */
export function ExportPage() {
  const { exportId = '' } = useParams();
  const { studyCode } = useActing();
  const query = useQuery(exportQuery(studyCode, exportId));
  const title = query.data ? `Export ${query.data.number}` : 'Export';
  usePageTitle(`${title} · ${studyCode}`);
  return (
    <>
      <Breadcrumbs crumbs={[{ label: 'Exports', to: `/studies/${studyCode}/exports` }, { label: title }]} />
      <Loaded query={query} lines={10}>
        {(row) => <ExportView study={studyCode} row={row} />}
      </Loaded>
    </>
  );
}
