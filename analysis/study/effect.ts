import { analyse } from '../statistics/analyse.ts';
import { AnalysisError } from '../statistics/core/analysis-error.ts';
import type { Result } from '../statistics/core/result.ts';
import { analysisColumns, analysisRow, toCsv } from './analysis-table.ts';
import type { PeriodChange } from './changes.ts';
import type { OutcomeKey, StudyPlan } from './study-plan.ts';

/** The effect on one outcome: a difference of natural logarithms, and the same as a ratio. */
export interface Effect {
  outcome: OutcomeKey;
  /** What the numbers come from, in the words of the analysis contract. */
  method: string;
  n: number;
  logEstimate: number;
  standardError: number;
  logLower: number;
  logUpper: number;
  ratio: number;
  ratioLower: number;
  ratioUpper: number;
  t: number;
  df: number;
  pValue: number;
  /** Adjusted over the plan's outcomes where the plan says so. */
  pAdjusted: number | null;
  /** The whole result of the method, for tables and for the archive. */
  result: Result;
}

/** Margins on the log scale for two one-sided tests. */
export interface LogMargins {
  lower: number;
  upper: number;
}

/** The plan in the words of the analysis contract, for one outcome, and the data it works on. */
export function contractAnalysis(
  plan: StudyPlan,
  changes: readonly PeriodChange[],
  outcome: OutcomeKey,
  margins: LogMargins | null = null,
): { plan: Record<string, unknown>; csv: string } {
  const rows = changes.map(analysisRow);
  if (plan.design === 'crossover-2x2') {
    return {
      plan: {
        method: 'crossover_2x2',
        outcome: `log_change_${outcome}`,
        subject: 'participant',
        condition: 'condition',
        levels: plan.conditions,
        period: 'period',
        period_levels: ['1', '2'],
        confidence: plan.confidence,
        ...(margins ? { equivalence_lower: margins.lower, equivalence_upper: margins.upper } : {}),
      },
      csv: toCsv(analysisColumns, rows),
    };
  }
  const long = rows.flatMap((row) =>
    (['before', 'after'] as const).map((time) => ({
      participant: row.participant,
      condition: row.condition,
      time,
      value: row[`${outcome}_${time}`],
    })),
  );
  const csv = toCsv(['participant', 'condition', 'time', 'value'], long);
  const common = { outcome: 'value', subject: 'participant', condition: 'time', levels: ['after', 'before'] };
  if (plan.design === 'parallel') {
    return {
      plan: {
        method: 'ancova_change',
        ...common,
        between: ['condition'],
        factor_levels: { condition: plan.conditions },
        transform: 'log',
        confidence: plan.confidence,
      },
      csv,
    };
  }
  return { plan: { method: 'paired_t', ...common, transform: 'log', confidence: plan.confidence }, csv };
}

const keysOf = {
  crossover_2x2: [
    'treatment_effect',
    'treatment_se',
    'treatment_ci_lower',
    'treatment_ci_upper',
    'treatment_t',
    'treatment_df',
    'treatment_p_value',
  ],
  ancova_change: [
    'adjusted_difference',
    'adjusted_difference_se',
    'adjusted_difference_ci_lower',
    'adjusted_difference_ci_upper',
    't',
    'df',
    'p_value',
  ],
  paired_t: ['mean_difference', 'standard_error', 'ci_lower', 'ci_upper', 't', 'df', 'p_value'],
} as const;

/**
 * The effect on one outcome by the plan's method.
 * @throws AnalysisError when the data do not allow it (too few participants, no variance)
 */
export function effectOn(
  plan: StudyPlan,
  changes: readonly PeriodChange[],
  outcome: OutcomeKey,
  margins: LogMargins | null = null,
): Effect {
  const { plan: contract, csv } = contractAnalysis(plan, changes, outcome, margins);
  const result = analyse(contract, csv);
  const [estimate, se, lower, upper, t, df, p] = keysOf[plan.method].map((name) => result.estimates[name]);
  for (const value of [estimate, se, lower, upper, t, df, p]) {
    if (typeof value !== 'number') {
      throw new AnalysisError('zero_variance', {}, `The effect on ${outcome} cannot be estimated.`);
    }
  }
  return {
    outcome,
    method: plan.method,
    n: result.n,
    logEstimate: estimate!,
    standardError: se!,
    logLower: lower!,
    logUpper: upper!,
    ratio: Math.exp(estimate!),
    ratioLower: Math.exp(lower!),
    ratioUpper: Math.exp(upper!),
    t: t!,
    df: df!,
    pValue: p!,
    pAdjusted: null,
    result,
  };
}
