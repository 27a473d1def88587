import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { SourceDocumentDto } from '#schemas/api/source.ts';
import { attestations, sourceKinds } from '#schemas/vocabulary/source-kinds.ts';
import { Button } from '../../../components/button.tsx';
import { PdfView } from '../../../components/pdf-view/pdf-view.tsx';
import { Loaded } from '../../../components/states.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { formatBytes, formatPercent } from '../../../lib/format/numbers.ts';
import { useZone } from '../../../lib/session/session.ts';
import { contentQuery, contentUrl } from '../api/source.ts';
import { CsvTable } from './csv-table.tsx';
import { ImageView } from './image-view.tsx';

const zooms = [0.5, 0.75, 1, 1.25, 1.5, 2, 3];

/** One source document: what it is, its hash, and its content with zoom, turn and pages. */
export function SourceView({ study, document }: { study: string; document: SourceDocumentDto }) {
  const [zoom, setZoom] = useState(1);
  const [rotation, setRotation] = useState(0);
  const [page, setPage] = useState(1);
  const [pages, setPages] = useState(1);
  const zone = useZone();
  const label = sourceKinds[document.kind];
  const step = (by: number): void => setZoom(zooms[zooms.indexOf(zoom) + by] ?? zoom);
  const pdf = document.mediaType === 'application/pdf';
  return (
    <div className="flex min-w-0 flex-col gap-2">
      <p className="text-sm text-ink-soft">
        {attestations[document.attestation]} · uploaded by {document.uploadedBy},{' '}
        {formatMoment(document.uploadedAt, zone)} · {formatBytes(document.size)}
        {document.level === 'unblinding' && ' · unblinding'}
        <span className="block font-mono text-xs break-all">SHA-256 {document.sha256}</span>
      </p>
      {document.mediaType !== 'text/csv' && (
        <div
          role="group"
          aria-label="How the document is shown"
          className="flex flex-wrap items-center gap-2"
        >
          <Button aria-label="Smaller" onClick={() => step(-1)}>
            −
          </Button>
          <span className="w-14 text-center text-sm">{formatPercent(zoom)}</span>
          <Button aria-label="Larger" onClick={() => step(1)}>
            +
          </Button>
          <Button onClick={() => setRotation((rotation + 90) % 360)}>Turn</Button>
          {pdf && pages > 1 && (
            <>
              <Button disabled={page <= 1} onClick={() => setPage(page - 1)}>
                Previous page
              </Button>
              <span className="text-sm">
                page {page} of {pages}
              </span>
              <Button disabled={page >= pages} onClick={() => setPage(page + 1)}>
                Next page
              </Button>
            </>
          )}
        </div>
      )}
      <div className="h-[70dvh] min-h-80 overflow-hidden rounded border">
        {pdf ? (
          <PdfView
            url={contentUrl(study, document.id)}
            label={label}
            page={page}
            zoom={zoom}
            rotation={rotation}
            onPages={setPages}
          />
        ) : (
          <FileContent study={study} document={document} label={label} zoom={zoom} rotation={rotation} />
        )}
      </div>
    </div>
  );
}

interface FileContentProps {
  study: string;
  document: SourceDocumentDto;
  label: string;
  zoom: number;
  rotation: number;
}

function FileContent({ study, document, label, zoom, rotation }: FileContentProps) {
  const query = useQuery(contentQuery(study, document.id));
  return (
    <Loaded query={query} lines={8}>
      {(file) =>
        document.mediaType === 'text/csv' ? (
          <CsvTable id={document.id} file={file} label={label} />
        ) : (
          <ImageView file={file} label={label} zoom={zoom} rotation={rotation} />
        )
      }
    </Loaded>
  );
}
