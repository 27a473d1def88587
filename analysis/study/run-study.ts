import { adjustPValues } from './adjust-outcomes.ts';
import { analysisRow, type AnalysisRow } from './analysis-table.ts';
import { studyChanges, type LeftOut } from './changes.ts';
import { effectOn, type Effect, type LogMargins } from './effect.ts';
import { groupSplit, type GroupSplit } from './group-split.ts';
import { detectableChange, participantSplits, type ParticipantSplit } from './participant-splits.ts';
import {
  lawLabel,
  lawSensitivity,
  twinAnalyses,
  type LawSensitivity,
  type TwinAnalysis,
} from './sensitivity.ts';
import {
  answerSentence,
  verdictOf,
  type EquivalenceVerdict,
  type SentencePart,
  type Verdict,
} from './sentence.ts';
import type { StudyData } from './study-data.ts';
import type { OutcomeKey, StudyPlan } from './study-plan.ts';

/** The version of what this engine computes: part of a run's identity, raised whenever a number could change. */
export const engineVersion = '1.0.0';

/** Everything a run's page, print and archive show; nothing in it depends on clock or machine. */
export interface StudyResult {
  engineVersion: string;
  sentence: SentencePart[];
  verdict: Verdict;
  law: string | null;
  flow: { allocated: number; analysed: number };
  effects: Effect[];
  split: GroupSplit | null;
  equivalence: EquivalenceVerdict | null;
  participants: ParticipantSplit[];
  /** Log scale; null where it cannot be said. */
  detectableChange: number | null;
  /** The analysis-ready table the numbers come from. */
  table: AnalysisRow[];
  leftOut: LeftOut[];
  sensitivity: { laws: LawSensitivity[]; twins: TwinAnalysis[] };
  cautions: { code: string; message: string; moments: number }[];
}

/**
 * Carries a plan out on the data of a cut: the split, its tests, its sensitivity and its sentence.
 *
 * Shape    one plan, one cut's data; the same two give the same bytes in any process
 * Errors   AnalysisError when the data do not allow the plan's method (too few participants, no variance)
 * Source   haemodynamics reference 6; bench practice 4; the methods by the analysis contract
 */
export function runStudy(plan: StudyPlan, data: StudyData): StudyResult {
  const { changes, leftOut, cautions } = studyChanges(plan, data);
  const margins = (outcome: OutcomeKey): LogMargins | null =>
    plan.equivalence?.outcome === outcome
      ? { lower: Math.log(plan.equivalence.lower), upper: Math.log(plan.equivalence.upper) }
      : null;
  const effects = adjustPValues(
    plan,
    [plan.primary, ...plan.secondary].map((outcome) => effectOn(plan, changes, outcome, margins(outcome))),
  );
  const main = effects[0]!;
  const splits = participantSplits(plan, changes);
  const part = (outcome: OutcomeKey): Effect =>
    effects.find((effect) => effect.outcome === outcome) ?? effectOn(plan, changes, outcome);
  const split =
    plan.viscosity === null
      ? null
      : groupSplit(
          plan,
          { total: part('resistance'), rheological: part('viscosity'), geometric: part('hindrance') },
          splits,
        );
  const equivalence = equivalenceOf(plan, effects);
  const geometric = split?.geometric ?? null;
  const verdict = verdictOf(main, geometric, equivalence);
  const labels = new Map(data.conditions.map(({ key, label }) => [key, label]));
  return {
    engineVersion,
    sentence: answerSentence(plan, labels, {
      main,
      rheological: split?.rheological ?? null,
      geometric,
      equivalence,
      verdict,
    }),
    verdict,
    law: plan.viscosity === null ? null : lawLabel(plan.viscosity.law),
    flow: { allocated: data.participants.length, analysed: splits.length },
    effects,
    split,
    equivalence,
    participants: splits.toSorted((a, b) => a.total - b.total),
    detectableChange: detectableChange(plan, changes),
    table: changes.map(analysisRow),
    leftOut,
    sensitivity: { laws: lawSensitivity(plan, data), twins: twinAnalyses(plan, changes) },
    cautions,
  };
}

/** Two one-sided tests on the log scale, from the same result as the effect. */
function equivalenceOf(plan: StudyPlan, effects: readonly Effect[]): EquivalenceVerdict | null {
  const { equivalence } = plan;
  const effect = effects.find(({ outcome }) => outcome === equivalence?.outcome);
  if (equivalence === null || effect === undefined) return null;
  const { estimates } = effect.result;
  const [p, level, lower, upper, yes] = [
    'treatment_equivalence_p_value',
    'treatment_equivalence_ci_level',
    'treatment_equivalence_ci_lower',
    'treatment_equivalence_ci_upper',
    'treatment_equivalent',
  ].map((name) => estimates[name]);
  if (
    typeof p !== 'number' ||
    typeof level !== 'number' ||
    typeof lower !== 'number' ||
    typeof upper !== 'number'
  ) {
    return null;
  }
  return {
    outcome: equivalence.outcome,
    lower: equivalence.lower,
    upper: equivalence.upper,
    pValue: p,
    level,
    ratioLower: Math.exp(lower),
    ratioUpper: Math.exp(upper),
    equivalent: yes === 1,
  };
}
