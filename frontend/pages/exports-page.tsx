import { Card, PageHead } from '../components/card.tsx';
import { ExportTable } from '../features/exports/components/export-table.tsx';
import { RequestExport } from '../features/exports/components/request-export.tsx';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The register of exports, and the request for another. */
export function ExportsPage() {
  const { studyCode } = useActing();
  const may = useMay();
  usePageTitle(`Exports · ${studyCode}`);
  return (
    <>
      <PageHead title="Exports" note="the register of what left, and what was asked for" />
      {may('request', 'ExportRequest') && <RequestExport study={studyCode} />}
      <Card flush>
        <ExportTable study={studyCode} />
      </Card>
    </>
  );
}
