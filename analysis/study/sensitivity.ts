import { viscosityLawNamed } from '../haemorheology/viscosity-laws.ts';
import { analyse } from '../statistics/analyse.ts';
import { AnalysisError } from '../statistics/core/analysis-error.ts';
import type { Result } from '../statistics/core/result.ts';
import { toCsv } from './analysis-table.ts';
import { studyChanges, type PeriodChange } from './changes.ts';
import { contractAnalysis, effectOn, type Effect } from './effect.ts';
import { participantSplits } from './participant-splits.ts';
import type { StudyData } from './study-data.ts';
import type { ChosenLaw, OutcomeKey, StudyPlan } from './study-plan.ts';

/** The split under another viscosity law. */
export interface LawSensitivity {
  law: ChosenLaw;
  label: string;
  n: number;
  rheological: Effect;
  geometric: Effect;
  /** rheological / total as it comes out, without the rule that decides whether shares are shown. */
  shareOfTotal: number;
  cautions: { code: string; message: string; moments: number }[];
}

/** Another way to the same question: what it is, and its result or why there is none. */
export interface TwinAnalysis {
  key: 'wilcoxon' | 'ancova-baseline' | 'shapiro-wilk' | 'leave-one-out';
  outcome: OutcomeKey;
  label: string;
  result: Result | null;
  refused: string | null;
}

/** A law with its parameters in words: `Quemada, coefficients of Cokelet, 200 /s`. */
export function lawLabel(chosen: ChosenLaw): string {
  const law = viscosityLawNamed(chosen.law);
  const parameters = law.parameters.map(({ name, unit, default: usual }) => {
    const value = (chosen as unknown as Record<string, number | undefined>)[name] ?? usual;
    return `${value} ${unit === 'um' ? 'µm' : unit}`;
  });
  return [law.name, ...parameters].join(', ');
}

/** The plan's law and its sensitivity laws, each through the whole analysis (haemodynamics reference 6.5). */
export function lawSensitivity(plan: StudyPlan, data: StudyData): LawSensitivity[] {
  if (plan.viscosity === null) return [];
  const laws = [plan.viscosity.law, ...plan.sensitivityLaws];
  const seen = new Set<string>();
  return laws.flatMap((law) => {
    const label = lawLabel(law);
    if (seen.has(label)) return [];
    seen.add(label);
    const { changes, cautions } = studyChanges(plan, data, law);
    const total = effectOn(plan, changes, 'resistance');
    const rheological = effectOn(plan, changes, 'viscosity');
    const geometric = effectOn(plan, changes, 'hindrance');
    const shareOfTotal = rheological.logEstimate / total.logEstimate;
    return [{ law, label, n: total.n, rheological, geometric, shareOfTotal, cautions }];
  });
}

/** The non-parametric twin, the analysis adjusted for each period's baseline, and the check of normality. */
export function twinAnalyses(plan: StudyPlan, changes: readonly PeriodChange[]): TwinAnalysis[] {
  const outcomes = [plan.primary, ...plan.secondary];
  return outcomes.flatMap((outcome) => [
    ...(plan.design === 'parallel'
      ? []
      : [
          twin('wilcoxon', outcome, 'Wilcoxon signed rank on the participants’ log-changes', () =>
            onDifferences(plan, changes, outcome, 'wilcoxon_signed_rank'),
          ),
          twin('shapiro-wilk', outcome, 'Shapiro–Wilk test of the participants’ log-changes', () =>
            onDifferences(plan, changes, outcome, 'shapiro_wilk'),
          ),
        ]),
    ...(plan.design === 'crossover-2x2'
      ? [
          twin('ancova-baseline', outcome, 'After values, adjusted for each period’s baseline', () =>
            ancova(plan, changes, outcome),
          ),
        ]
      : []),
  ]);
}

function twin(key: TwinAnalysis['key'], outcome: OutcomeKey, label: string, run: () => Result): TwinAnalysis {
  try {
    return { key, outcome, label, result: run(), refused: null };
  } catch (error) {
    // A sensitivity analysis that the data do not allow is said, and does not take the main one with it.
    if (error instanceof AnalysisError) return { key, outcome, label, result: null, refused: error.message };
    throw error;
  }
}

/** A method on one log-change a participant, against no change. */
function onDifferences(
  plan: StudyPlan,
  changes: readonly PeriodChange[],
  outcome: OutcomeKey,
  method: string,
): Result {
  const part = {
    resistance: 'total',
    conductance: 'total',
    viscosity: 'rheological',
    hindrance: 'geometric',
  } as const;
  const sign = outcome === 'conductance' ? -1 : 1;
  const rows = participantSplits(plan, changes).flatMap((split) => {
    const value = split[part[outcome]];
    if (value === null) return [];
    return [
      { participant: split.participant, state: 'change', value: sign * value },
      { participant: split.participant, state: 'none', value: 0 },
    ];
  });
  return analyse(
    {
      method,
      subject: 'participant',
      outcome: 'value',
      condition: 'state',
      levels: ['change', 'none'],
      confidence: plan.confidence,
    },
    toCsv(['participant', 'state', 'value'], rows),
  );
}

/** The 2×2 crossover of after values with the period's baseline as covariate (Kenward and Roger 2010). */
function ancova(plan: StudyPlan, changes: readonly PeriodChange[], outcome: OutcomeKey): Result {
  const { plan: contract, csv } = contractAnalysis(plan, changes, outcome);
  return analyse(
    { ...contract, outcome: `${outcome}_after`, baseline: `${outcome}_before`, transform: 'log' },
    csv,
  );
}
