import type { ChosenLaw, StudyPlan } from '#analysis/study/study-plan.ts';
import type { Protocol } from '#schemas/protocol/protocol.ts';

/** What a plan takes from a protocol. */
export type PlanBasis = Pick<Protocol, 'title' | 'design' | 'conditions' | 'visitTypes'>;

const methods: Record<StudyPlan['design'], StudyPlan['method']> = {
  'crossover-2x2': 'crossover_2x2',
  parallel: 'ancova_change',
  'single-group': 'paired_t',
};

const splitLaw: ChosenLaw = { law: 'quemada-cokelet', shearRate: 200 };

/** Laws of other kinds and sources than the chosen one, because the split depends on the law most. */
const otherLaws: ChosenLaw[] = [
  { law: 'pries-bulk' },
  { law: 'pries-in-vitro', diameter: 100 },
  { law: 'quemada-das' },
];

/**
 * A plan to begin with: what the protocol settles is filled in; the rest is a start that its author decides on.
 *
 * @param seed of the run's random numbers, a whole number from 0 to 2³¹ − 1
 */
export function planTemplate(basis: PlanBasis, seed: number): StudyPlan {
  const measures = basis.visitTypes.flatMap((visit) => visit.measures);
  const measured = new Set(measures.map(({ quantity }) => quantity));
  const times = [...new Set(measures.map(({ timePoint }) => timePoint))];
  const baseline = times.includes('baseline') ? 'baseline' : (times[0] ?? 'baseline');
  const [first, second] = basis.conditions;
  const flow = measured.has('forearmBloodFlow') || !measured.has('brachialBloodFlow');
  const splits = flow && measured.has('haematocrit');
  const compared = basis.design !== 'single-group' && first !== undefined && second !== undefined;
  const contrast = compared
    ? `ratio of geometric means, after over baseline, ${first.label} over ${second.label}`
    : 'ratio of geometric means, after over baseline';
  return {
    title: basis.title,
    estimand: `Population: all allocated participants. Variable: forearm vascular resistance. Summary: ${contrast}. Intercurrent events: values are used as measured.`,
    design: basis.design,
    conditions: compared ? [first.key, second.key] : null,
    flow: flow ? 'forearmBloodFlow' : 'brachialBloodFlow',
    baselineTimePoint: baseline,
    timePoint: times.find((time) => time !== baseline) ?? 'after',
    viscosity: splits
      ? { law: splitLaw, plasma: measured.has('plasmaViscosity') ? 'measured' : usualPlasma }
      : null,
    primary: 'resistance',
    secondary: splits ? ['viscosity', 'hindrance'] : [],
    method: methods[basis.design],
    equivalence:
      splits && basis.design === 'crossover-2x2' ? { outcome: 'hindrance', lower: 0.8, upper: 1.25 } : null,
    confidence: 0.95,
    multiplicity: 'holm',
    missingData: 'Participants with all values of a comparison are analysed; the others are listed with why.',
    sensitivityLaws: splits ? otherLaws : [],
    seed,
  };
}

/** Plasma at 37 °C, mPa·s, where none is measured: middle of the usual 1.10 to 1.30 (common practice, no source). */
const usualPlasma = 1.2;
