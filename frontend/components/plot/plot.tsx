import { useEffect, useId, useRef, useState } from 'react';
import { ErrorState } from '../states.tsx';
import { PlotTable, type PlotTableContent } from './plot-table.tsx';
import { coloursOf, type PlotColours } from './plot-colours.ts';
import { baseLayout, type PlotDrawing } from './plot-layout.ts';
import { useScheme } from './use-scheme.ts';

interface PlotProps {
  title: string;
  /** What the plot shows, in a sentence; stands below it and is read aloud. */
  description: string;
  /** Traces and layout in the colours of the scheme. Keep the same function while the data are the same. */
  draw: (colours: PlotColours) => PlotDrawing;
  /** The same data as a table: what is drawn can be read (AX-09). */
  table: PlotTableContent;
  height?: number;
  /** Name of a downloaded picture, without ending and without participants' codes. */
  fileName: string;
}

type Plotly = (typeof import('plotly.js-dist-min'))['default'];

/** A plot: Plotly, fetched when first needed, with title, description, data table and picture download. */
export function Plot({ title, description, draw, table, height = 360, fileName }: PlotProps) {
  const id = useId();
  const canvas = useRef<HTMLDivElement>(null);
  const [plotly, setPlotly] = useState<Plotly>();
  const [error, setError] = useState<unknown>();
  const [asTable, setAsTable] = useState(false);
  const scheme = useScheme();

  useEffect(() => {
    import('plotly.js-dist-min').then((module) => setPlotly(() => module.default), setError);
  }, []);

  useEffect(() => {
    const element = canvas.current;
    if (!plotly || !element || asTable) return;
    const colours = coloursOf(element);
    const { traces, layout } = draw(colours);
    void plotly.react(
      element,
      traces,
      { ...baseLayout(colours, height), ...layout },
      { displayModeBar: false, responsive: true },
    );
    return () => plotly.purge(element);
  }, [plotly, draw, height, asTable, scheme]);

  const download = (format: 'svg' | 'png') => {
    const element = canvas.current;
    if (!plotly || !element) return;
    void plotly.downloadImage(element, {
      format,
      filename: fileName,
      width: element.clientWidth,
      height,
      scale: 2,
    });
  };

  if (error !== undefined) return <ErrorState error={error} onRetry={() => location.reload()} />;
  return (
    <figure aria-labelledby={`${id}-title`} className="m-0 flex flex-col gap-1">
      <figcaption className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <span id={`${id}-title`} className="font-semibold text-soot">
          {title}
        </span>
        <span data-print="hide" className="ml-auto flex gap-4 text-sm">
          <PlotButton onClick={() => setAsTable(!asTable)}>{asTable ? 'Plot' : 'Data table'}</PlotButton>
          {!asTable && <PlotButton onClick={() => download('svg')}>SVG</PlotButton>}
          {!asTable && <PlotButton onClick={() => download('png')}>PNG</PlotButton>}
        </span>
      </figcaption>
      {asTable ? (
        <PlotTable caption={title} table={table} />
      ) : (
        <div ref={canvas} role="img" aria-label={`${title}. ${description}`} style={{ minHeight: height }} />
      )}
      <p className="text-sm text-ink-soft">{description}</p>
    </figure>
  );
}

function PlotButton({ onClick, children }: { onClick: () => void; children: string }) {
  return (
    <button type="button" className="min-h-6 link" onClick={onClick}>
      {children}
    </button>
  );
}
