import { mean, median, standardDeviation } from './summaries.ts';
import { requireCount, requireFinite } from '../units/require.ts';

export interface Reading {
  readonly value: number;
  /** Absent or true: the reading counts. A rejected one stays on record with its reason. */
  readonly accepted?: boolean;
}

/** How an instrument's repeated readings become one value. */
export type ReadingRule =
  | { readonly kind: 'mean' }
  /** The last `count`: accepted ones reaching further back, or fewer when a rejected one is not replaced. */
  | { readonly kind: 'last'; readonly count: number; readonly replaceRejected: boolean }
  /** Cuff pressures: the first of at least three is left out; one more when the last two lie further apart. */
  | { readonly kind: 'without-first'; readonly apart?: number }
  /** Haematocrit tubes: the mean of two, or the median of three when the first two lie further apart. */
  | { readonly kind: 'duplicate'; readonly apart: number };

export interface ReadingSummary {
  readonly value: number;
  /** Positions, from 0, of the readings that counted: apply them to a paired series (systolic and diastolic) too. */
  readonly used: readonly number[];
  readonly n: number;
  readonly standardDeviation: number | undefined;
  readonly coefficientOfVariationPercent: number | undefined;
  /** The rule asks for one more reading. */
  readonly oneMore: boolean;
}

/**
 * Summarises repeated readings by a rule fixed in the protocol.
 *
 * Formula  mean of the readings that count (median of three tubes); CV = 100 · SD/|mean|, SD with n − 1
 * Units    those of the readings
 * Shape    one series in the order taken
 * Domain   finite; as many accepted readings as the rule needs (without-first at least 3 readings, duplicate 2)
 * Errors   DomainError naming the argument; never NaN
 * Source   common practice of the field; 5 mmHg and 0.01 or 0.005 apart are usual
 */
export function summariseReadings(rule: ReadingRule, readings: readonly Reading[]): ReadingSummary {
  readings.forEach(({ value }, index) => requireFinite(`readings[${index + 1}]`, value));
  const accepted = readings.flatMap(({ accepted = true }, index) => (accepted ? [index] : []));
  const used = usedReadings(rule, accepted, readings.length);
  requireCount('readings', used, 1, 'Accept at least one reading, or state why the value is missing.');
  const values = used.map((index) => readings[index]!.value);
  const centre = mean(values);
  const spread = values.length > 1 ? standardDeviation(values) : undefined;
  return {
    value: rule.kind === 'duplicate' && values.length > 2 ? median(values) : centre,
    used,
    n: used.length,
    standardDeviation: spread,
    coefficientOfVariationPercent:
      spread === undefined || centre === 0 ? undefined : (100 * spread) / Math.abs(centre),
    oneMore: needsOneMore(rule, values),
  };
}

function usedReadings(rule: ReadingRule, accepted: readonly number[], total: number): readonly number[] {
  switch (rule.kind) {
    case 'mean':
      return accepted;
    case 'last':
      return rule.replaceRejected
        ? accepted.slice(-rule.count)
        : accepted.filter((index) => index >= total - rule.count);
    case 'without-first':
      requireCount('readings', accepted, 3, 'Take three readings; the first is left out.');
      return accepted.slice(1);
    case 'duplicate':
      requireCount('readings', accepted, 2, 'Read two tubes.');
      return accepted.slice(0, 3);
  }
}

function needsOneMore(rule: ReadingRule, values: readonly number[]): boolean {
  if (rule.kind === 'without-first') {
    return rule.apart !== undefined && values.length === 2 && Math.abs(values[1]! - values[0]!) > rule.apart;
  }
  // A decimal difference of exactly the limit is accepted; binary rounding must not decide it.
  return (
    rule.kind === 'duplicate' &&
    values.length === 2 &&
    Math.abs(values[1]! - values[0]!) > rule.apart * (1 + 1e-9)
  );
}
