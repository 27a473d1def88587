import type { Data, Layout } from 'plotly.js-dist-min';
import type { PlotColours } from './plot-colours.ts';

export interface PlotDrawing {
  traces: Data[];
  layout?: Partial<Layout>;
}

/** What all plots share: the page's type and hairlines, no frame, no shadows. */
export function baseLayout(colours: PlotColours, height: number): Partial<Layout> {
  const axis = {
    gridcolor: colours.rule,
    linecolor: colours.rule,
    zerolinecolor: colours['ink-soft'],
    tickfont: { size: 12, color: colours['ink-soft'] },
    automargin: true,
  };
  return {
    height,
    margin: { t: 12, r: 12, b: 44, l: 56 },
    paper_bgcolor: 'rgba(0,0,0,0)',
    plot_bgcolor: 'rgba(0,0,0,0)',
    font: { family: '"Noto Sans", sans-serif', size: 13, color: colours.ink },
    xaxis: axis,
    yaxis: axis,
    showlegend: false,
    hovermode: 'closest',
    hoverlabel: { bgcolor: colours.paper, bordercolor: colours.rule, font: { color: colours.ink } },
  };
}
