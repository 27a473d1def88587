import { useCallback } from 'react';
import type { StudyResult } from '#analysis/study/run-study.ts';
import { Plot } from '../../../components/plot/plot.tsx';
import type { PlotColours } from '../../../components/plot/plot-colours.ts';
import type { PlotDrawing } from '../../../components/plot/plot-layout.ts';
import { formatNumber } from '../../../lib/format/numbers.ts';
import { percentWords } from '../model/words.ts';

/** A row a participant: the viscosity part from zero, the tone part from where it ends, a mark for the total. */
export function SplitChart({ result, name }: { result: StudyResult; name: string }) {
  const { participants, detectableChange } = result;
  const draw = useCallback(
    (colours: PlotColours) => drawing(participants, detectableChange, colours),
    [participants, detectableChange],
  );
  return (
    <Plot
      title="The split, participant by participant"
      description={`Change of the logarithm, shown in per cent; each row one participant, ordered by the total. Blue: viscosity part, from zero. Grey: tone part, from where viscosity ends. Diamond: the total.${detectableChange === null ? '' : ` The band is the smallest change of tone that this study can tell from noise in one person (${percentWords(-detectableChange)} to ${percentWords(detectableChange)}).`}`}
      draw={draw}
      height={Math.max(280, 60 + participants.length * 22)}
      fileName={name}
      table={{
        columns: [
          { header: 'Participant' },
          { header: 'Viscosity part', numeric: true },
          { header: 'Tone part', numeric: true },
          { header: 'Total', numeric: true },
        ],
        rows: participants.map(({ participant, rheological, geometric, total }) => [
          participant,
          rheological === null ? 'none' : percentWords(rheological),
          geometric === null ? 'none' : percentWords(geometric),
          percentWords(total),
        ]),
      }}
    />
  );
}

/** Round percentages, placed where their logarithms fall. */
const tickPercentages = [-60, -50, -40, -30, -20, -10, 0, 10, 20, 30, 50, 80];

function drawing(
  participants: StudyResult['participants'],
  detectable: number | null,
  colours: PlotColours,
): PlotDrawing {
  const rows = participants.map(({ participant }) => participant);
  const parts = participants.map(({ rheological, geometric, total }) => ({
    viscosity: rheological ?? 0,
    tone: geometric ?? total,
  }));
  return {
    traces: [
      {
        type: 'bar',
        orientation: 'h',
        y: rows,
        x: parts.map(({ viscosity }) => viscosity),
        name: 'viscosity part',
        offset: -0.38,
        width: 0.36,
        marker: { color: colours.venous },
      },
      {
        type: 'bar',
        orientation: 'h',
        y: rows,
        x: parts.map(({ tone }) => tone),
        base: parts.map(({ viscosity }) => viscosity),
        name: 'tone part',
        offset: 0.02,
        width: 0.36,
        marker: { color: colours['ink-soft'] },
      },
      {
        type: 'scatter',
        mode: 'markers',
        y: rows,
        x: participants.map(({ total }) => total),
        name: 'total',
        marker: { color: colours.arterial, symbol: 'diamond', size: 9 },
      },
    ],
    layout: {
      barmode: 'overlay',
      showlegend: true,
      legend: { orientation: 'h', y: 1.06 },
      xaxis: {
        tickvals: tickPercentages.map((percent) => Math.log1p(percent / 100)),
        ticktext: tickPercentages.map(
          (percent) => `${percent > 0 ? '+' : ''}${formatNumber(percent, { decimals: 0 })} %`,
        ),
        zeroline: true,
      },
      yaxis: { autorange: 'reversed', automargin: true, tickfont: { size: 11 } },
      ...(detectable === null
        ? {}
        : {
            shapes: [
              {
                type: 'rect',
                xref: 'x',
                yref: 'paper',
                x0: -detectable,
                x1: detectable,
                y0: 0,
                y1: 1,
                fillcolor: colours.rule,
                opacity: 0.35,
                line: { width: 0 },
                layer: 'below',
              },
            ],
          }),
    },
  };
}
