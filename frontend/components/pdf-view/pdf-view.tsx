import { useEffect, useEffectEvent, useRef, useState } from 'react';
import { ErrorState, Skeleton } from '../states.tsx';
import { openPdf, type OpenPdf } from './open-pdf.ts';

interface PdfViewProps {
  /** Of our own origin. */
  url: string;
  /** Describes the document for those who do not see it. */
  label: string;
  /** From 1. */
  page: number;
  /** 1 fits the width. */
  zoom?: number;
  /** Degrees, clockwise: 0, 90, 180, 270. */
  rotation?: number;
  /** Told once the document is open. */
  onPages?: (pages: number) => void;
}

/** One page of a PDF, drawn by pdf.js, which is fetched when first needed. */
export function PdfView({ url, label, page, zoom = 1, rotation = 0, onPages }: PdfViewProps) {
  const { pdf, error, retry } = usePdf(url, onPages);
  const frame = useRef<HTMLDivElement>(null);
  const canvas = useRef<HTMLCanvasElement>(null);
  const [failure, setFailure] = useState<unknown>();

  useEffect(() => {
    const [element, width] = [canvas.current, frame.current?.clientWidth ?? 0];
    if (!pdf || !element || width === 0) return;
    const drawing = pdf.draw(element, { page, width: width * zoom, rotation });
    drawing.done.catch(setFailure);
    return () => drawing.cancel();
  }, [pdf, page, zoom, rotation]);

  if (error !== undefined) return <ErrorState error={error} onRetry={retry} />;
  if (failure !== undefined) return <ErrorState error={failure} onRetry={() => setFailure(undefined)} />;
  return (
    <div
      ref={frame}
      role="region"
      aria-label={label}
      // A region that scrolls must be reachable by keyboard (WCAG 2.1.1).
      // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
      tabIndex={0}
      className="h-full overflow-auto bg-rule-soft"
    >
      {!pdf && <Skeleton lines={8} label={`Loading: ${label}`} />}
      <canvas
        ref={canvas}
        role="img"
        aria-label={`${label}, page ${page}`}
        className="bg-white mx-auto block"
        hidden={!pdf}
      />
    </div>
  );
}

function usePdf(url: string, onPages: ((pages: number) => void) | undefined) {
  const [opened, setOpened] = useState<{ url: string; pdf?: OpenPdf; error?: unknown }>();
  const [attempt, setAttempt] = useState(0);
  const tell = useEffectEvent((pages: number) => onPages?.(pages));

  useEffect(() => {
    let current = true;
    let open: OpenPdf | undefined;
    openPdf(url).then(
      (pdf) => {
        open = pdf;
        if (!current) return pdf.close();
        setOpened({ url, pdf });
        tell(pdf.pages);
      },
      (error: unknown) => current && setOpened({ url, error }),
    );
    return () => {
      current = false;
      open?.close();
    };
  }, [url, attempt]);

  const present = opened?.url === url ? opened : undefined;
  return {
    pdf: present?.pdf,
    error: present?.error,
    retry: () => {
      setOpened(undefined);
      setAttempt((count) => count + 1);
    },
  };
}
