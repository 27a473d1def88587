import { useCallback } from 'react';
import type { StudyResult } from '#analysis/study/run-study.ts';
import type { OutcomeKey } from '#analysis/study/study-plan.ts';
import { Plot } from '../../../components/plot/plot.tsx';
import type { PlotColours } from '../../../components/plot/plot-colours.ts';
import type { PlotDrawing } from '../../../components/plot/plot-layout.ts';
import { formatNumber } from '../../../lib/format/numbers.ts';
import { outcomeNames } from '../model/words.ts';

interface PairedPlotProps {
  result: StudyResult;
  outcome: OutcomeKey;
  name: string;
}

const geometricMean = (values: readonly number[]): number =>
  Math.exp(values.reduce((sum, value) => sum + Math.log(value), 0) / values.length);

/** Before and after in each condition, a line a participant; bars are geometric means. */
export function PairedPlot({ result, outcome, name }: PairedPlotProps) {
  const { table } = result;
  const draw = useCallback((colours: PlotColours) => drawing(table, outcome, colours), [table, outcome]);
  const rows = table.flatMap((row) => {
    const [before, after] = [row[`${outcome}_before`], row[`${outcome}_after`]];
    return typeof before === 'number' && typeof after === 'number' ? [{ ...row, before, after }] : [];
  });
  if (rows.length === 0) return null;
  return (
    <Plot
      title={outcomeNames[outcome]}
      description={`Lines join one participant’s value before and after, by condition; logarithmic axis. Bars: geometric means of ${rows.length} pairs.`}
      draw={draw}
      height={300}
      fileName={`${name}-${outcome}`}
      table={{
        columns: [
          { header: 'Participant' },
          { header: 'Condition' },
          { header: 'Before', numeric: true },
          { header: 'After', numeric: true },
        ],
        rows: rows.map(({ participant, condition, before, after }) => [
          String(participant),
          String(condition),
          formatNumber(before),
          formatNumber(after),
        ]),
      }}
    />
  );
}

function drawing(table: StudyResult['table'], outcome: OutcomeKey, colours: PlotColours): PlotDrawing {
  const conditions = [...new Set(table.map(({ condition }) => String(condition)))].sort();
  const traces: PlotDrawing['traces'] = [];
  const ticktext: string[] = [];
  conditions.forEach((condition, at) => {
    const pairs = table.flatMap((row) => {
      const [before, after] = [row[`${outcome}_before`], row[`${outcome}_after`]];
      return row.condition === condition && typeof before === 'number' && typeof after === 'number'
        ? [[before, after] as const]
        : [];
    });
    const [left, right] = [at * 2.4, at * 2.4 + 1];
    for (const pair of pairs) {
      traces.push({
        type: 'scatter',
        mode: 'lines+markers',
        x: [left, right],
        y: [...pair],
        line: { color: colours.rule, width: 1 },
        marker: { color: colours.ink, size: 5 },
        hoverinfo: 'y',
      });
    }
    [left, right].forEach((x, time) => {
      const mean = geometricMean(pairs.map((pair) => pair[time]!));
      traces.push({
        type: 'scatter',
        mode: 'lines',
        x: [x - 0.14, x + 0.14],
        y: [mean, mean],
        line: { color: colours.arterial, width: 4 },
        hoverinfo: 'y',
      });
    });
    ticktext.push(`before<br>${condition}`, `after<br>${condition}`);
  });
  return {
    traces,
    layout: {
      xaxis: {
        tickvals: conditions.flatMap((_condition, at) => [at * 2.4, at * 2.4 + 1]),
        ticktext,
        zeroline: false,
      },
      yaxis: { type: 'log', automargin: true },
    },
  };
}
