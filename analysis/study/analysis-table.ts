import type { PeriodChange } from './changes.ts';

/** The columns of the analysis-ready table: one row a participant and period. */
export const analysisColumns = [
  'participant',
  'period',
  'condition',
  'pressure_before',
  'pressure_after',
  'flow_before',
  'flow_after',
  'resistance_before',
  'resistance_after',
  'conductance_before',
  'conductance_after',
  'viscosity_before',
  'viscosity_after',
  'hindrance_before',
  'hindrance_after',
  'log_change_resistance',
  'log_change_conductance',
  'log_change_viscosity',
  'log_change_hindrance',
] as const;
export type AnalysisColumn = (typeof analysisColumns)[number];
export type AnalysisRow = Record<AnalysisColumn, string | number | null>;

/** One row of the table: the values at both times, and the natural logarithms of their ratios. */
export function analysisRow({ participant, period, condition, before, after }: PeriodChange): AnalysisRow {
  // The geometric part is the total less the rheological one, so that the parts add up to the last bit.
  const resistance = Math.log(after.resistance / before.resistance);
  const viscosity =
    before.viscosity === null || after.viscosity === null
      ? null
      : Math.log(after.viscosity / before.viscosity);
  return {
    participant,
    period,
    condition,
    pressure_before: before.pressure,
    pressure_after: after.pressure,
    flow_before: before.flow,
    flow_after: after.flow,
    resistance_before: before.resistance,
    resistance_after: after.resistance,
    conductance_before: before.conductance,
    conductance_after: after.conductance,
    viscosity_before: before.viscosity,
    viscosity_after: after.viscosity,
    hindrance_before: before.hindrance,
    hindrance_after: after.hindrance,
    log_change_resistance: resistance,
    log_change_conductance: -resistance,
    log_change_viscosity: viscosity,
    log_change_hindrance: viscosity === null ? null : resistance - viscosity,
  };
}

/** CSV (RFC 4180) of rows with these columns; an empty cell is missing, numbers keep every digit. */
export function toCsv<Column extends string>(
  columns: readonly Column[],
  rows: readonly Partial<Record<Column, string | number | null>>[],
): string {
  const lines = rows.map((row) => columns.map((column) => csvCell(row[column] ?? null)).join(','));
  return [columns.join(','), ...lines, ''].join('\r\n');
}

function csvCell(value: string | number | null): string {
  if (value === null) return '';
  const text = String(value);
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
