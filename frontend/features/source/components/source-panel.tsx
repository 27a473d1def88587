import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { SourceDocumentDto } from '#schemas/api/source.ts';
import { attestations, sourceKinds } from '#schemas/vocabulary/source-kinds.ts';
import { Button } from '../../../components/button.tsx';
import { Card } from '../../../components/card.tsx';
import { DataTable, type Column } from '../../../components/data-table.tsx';
import { Dialog } from '../../../components/dialog.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { formatBytes, shortHash } from '../../../lib/format/numbers.ts';
import { useZone } from '../../../lib/session/session.ts';
import { sourcesQuery } from '../api/source.ts';
import { ReplaceSourceDialog } from './replace-source-dialog.tsx';
import { SourceView } from './source-view.tsx';
import { UploadSource } from './upload-source.tsx';

interface SourcePanelProps {
  study: string;
  visitId: string;
  mayUpload: boolean;
}

/** The source documents of a visit: list, look at, upload, replace. */
export function SourcePanel({ study, visitId, mayUpload }: SourcePanelProps) {
  const query = useQuery(sourcesQuery(study, visitId));
  const zone = useZone();
  const [shown, setShown] = useState<SourceDocumentDto | null>(null);
  const [replaced, setReplaced] = useState<SourceDocumentDto | null>(null);
  const standing = (query.data ?? []).filter(({ replacedById }) => replacedById === null);
  const columns: Column<SourceDocumentDto>[] = [
    {
      header: 'Document',
      cell: (document) => (
        <Button variant="quiet" className="-ml-3" onClick={() => setShown(document)}>
          {sourceKinds[document.kind]}
        </Button>
      ),
    },
    { header: 'Stands to the original', cell: ({ attestation }) => attestations[attestation] },
    {
      header: 'Uploaded',
      cell: ({ uploadedBy, uploadedAt }) => `${uploadedBy}, ${formatMoment(uploadedAt, zone)}`,
    },
    { header: 'Size', numeric: true, cell: ({ size }) => formatBytes(size) },
    {
      header: 'SHA-256',
      cell: ({ sha256 }) => (
        <span className="font-mono text-xs" title={sha256}>
          {shortHash(sha256)}
        </span>
      ),
    },
    {
      header: 'State',
      cell: ({ replacedById }) =>
        replacedById === null ? (
          <StateMark state="settled" word="stands" />
        ) : (
          <StateMark state="late" word="replaced" />
        ),
    },
    {
      header: 'Acts',
      cell: (document) =>
        mayUpload && document.replacedById === null && standing.length > 1 ? (
          <Button variant="quiet" onClick={() => setReplaced(document)}>
            Replace<span className="sr-only"> {sourceKinds[document.kind]}</span>
          </Button>
        ) : null,
    },
  ];
  return (
    <Card title="Source documents" note="what the values are compared with">
      <DataTable
        caption="Source documents"
        captionHidden
        columns={columns}
        query={query}
        rowKey={({ id }) => id}
        sortParam="source-sort"
        empty={{
          title: 'No source document yet',
          children: <p>Upload the bench sheet, trace or report that the values were read from.</p>,
        }}
      />
      {mayUpload && <UploadSource study={study} visitId={visitId} />}
      {mayUpload && standing.length > 0 && (
        <p className="mt-2 text-sm text-ink-soft">
          To replace a document, upload the new one first; then put it in the older one’s place.
        </p>
      )}
      {shown !== null && (
        <Dialog
          wide
          title={sourceKinds[shown.kind]}
          onClose={() => setShown(null)}
          footer={<Button onClick={() => setShown(null)}>Close</Button>}
        >
          <SourceView study={study} document={shown} />
        </Dialog>
      )}
      {replaced !== null && (
        <ReplaceSourceDialog
          study={study}
          older={replaced}
          others={standing.filter(({ id }) => id !== replaced.id)}
          onClose={() => setReplaced(null)}
        />
      )}
    </Card>
  );
}
