import { useState } from 'react';
import type { DecideExportBody, ExportDto } from '#schemas/api/exports.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { Button } from '../../../components/button.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { formatBytes, shortHash } from '../../../lib/format/numbers.ts';
import { say } from '../../../lib/notices.ts';
import { useMay } from '../../../lib/session/ability.ts';
import { useZone } from '../../../lib/session/session.ts';
import { useDecideExport, useDownloadExport } from '../api/exports.ts';
import { isExpired } from '../model/export-look.ts';
import { saveFile } from '../model/save-file.ts';

interface ExportActsProps {
  study: string;
  row: ExportDto;
}

/** What this person may do with the export now. */
export function ExportActs({ study, row }: ExportActsProps) {
  const may = useMay();
  const [dialog, setDialog] = useState<DecideExportBody['decision'] | 'download' | null>(null);
  const [openedAt] = useState(Date.now);
  const close = (): void => setDialog(null);
  const mayDecide = row.state === 'requested' && !row.mine && may('decide', 'ExportRequest');
  const mayDownload =
    row.state === 'ready' && row.mine && may('download', 'ExportRequest') && !isExpired(row, openedAt);
  return (
    <>
      {mayDecide && (
        <>
          <Button variant="danger" onClick={() => setDialog('refuse')}>
            Refuse
          </Button>
          <Button variant="primary" onClick={() => setDialog('approve')}>
            Approve
          </Button>
        </>
      )}
      {mayDownload && (
        <Button variant="primary" onClick={() => setDialog('download')}>
          Download
        </Button>
      )}
      {(dialog === 'approve' || dialog === 'refuse') && (
        <DecideDialog study={study} row={row} decision={dialog} onClose={close} />
      )}
      {dialog === 'download' && <DownloadDialog study={study} row={row} onClose={close} />}
    </>
  );
}

interface DecideDialogProps extends ExportActsProps {
  decision: DecideExportBody['decision'];
  onClose: () => void;
}

function DecideDialog({ study, row, decision, onClose }: DecideDialogProps) {
  const decide = useDecideExport(study, row);
  const { participants, smallestGroup, alone } = row.report;
  const approves = decision === 'approve';
  const handleDecide = async (reason: string, password: string): Promise<void> => {
    await decide.mutateAsync({ decision, reason, password, reportHash: row.reportHash });
    say(approves ? 'The export is approved' : 'The export is refused');
  };
  return (
    <ActDialog
      title={`${approves ? 'Approve' : 'Refuse'} export ${row.number}`}
      act={approves ? 'Approve the export' : 'Refuse the export'}
      password
      consequences={
        approves ? (
          <>
            <p>
              De-identified rows of {participants} participants will leave, for {row.requestedBy}: “
              {row.purpose}”
            </p>
            <p>
              The smallest group of participants alike is {smallestGroup}; {alone} are alone in theirs. What
              was downloaded cannot be called back. You approve exactly the report{' '}
              <span className="font-mono text-xs">{shortHash(row.reportHash)}</span>.
            </p>
          </>
        ) : (
          <p>Nothing leaves. {row.requestedBy} reads your reason and may ask again.</p>
        )
      }
      onAct={({ reason, password = '' }) => handleDecide(reason, password)}
      onClose={onClose}
    />
  );
}

function DownloadDialog({ study, row, onClose }: ExportActsProps & { onClose: () => void }) {
  const download = useDownloadExport(study, row.id);
  const zone = useZone();
  return (
    <ActDialog
      title={`Download export ${row.number}`}
      act="Download"
      reasons={false}
      consequences={
        <p>
          The file ({row.size === null ? 'zip' : formatBytes(row.size)}) can be taken once
          {row.expiresAt === null ? '' : `, until ${formatMoment(row.expiresAt, zone)}`}. Keep the window open
          until it has arrived; if it does not, a new export is requested.
        </p>
      }
      onAct={async () => saveFile(await download.mutateAsync(), `export-${row.number}.zip`)}
      onClose={onClose}
    />
  );
}
