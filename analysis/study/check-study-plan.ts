import { viscosityLaws } from '../haemorheology/viscosity-laws.ts';
import type { ChosenLaw, OutcomeKey, StudyPlan } from './study-plan.ts';

/** A place in a plan that needs attention, and what to do about it. */
export interface PlanProblem {
  pointer: string;
  message: string;
}

const methodOfDesign: Record<StudyPlan['design'], StudyPlan['method']> = {
  'crossover-2x2': 'crossover_2x2',
  parallel: 'ancova_change',
  'single-group': 'paired_t',
};

const needsViscosity: readonly OutcomeKey[] = ['viscosity', 'hindrance'];

/**
 * What one member of a plan asks of another; the schema has been met before.
 * Within-person data are analysed within persons: a method that ignores the design is refused (SR-03).
 */
export function checkStudyPlan(plan: StudyPlan): PlanProblem[] {
  const problems: PlanProblem[] = [];
  const say = (pointer: string, message: string): number => problems.push({ pointer, message });

  if (plan.method !== methodOfDesign[plan.design]) {
    say('/method', `does not fit a ${plan.design} design; use ${methodOfDesign[plan.design]}`);
  }
  if (plan.design !== 'single-group' && plan.conditions === null) {
    say('/conditions', 'name the two conditions; ratios are the first over the second');
  }
  if (plan.baselineTimePoint === plan.timePoint)
    say('/timePoint', 'is the baseline itself; name a later time');
  const used = [plan.primary, ...plan.secondary, ...(plan.equivalence ? [plan.equivalence.outcome] : [])];
  if (plan.viscosity === null && used.some((outcome) => needsViscosity.includes(outcome))) {
    say('/viscosity', 'viscosity and hindrance need a law; choose one, or drop these outcomes');
  }
  if (plan.secondary.includes(plan.primary)) say('/secondary', 'repeats the primary outcome');
  if (plan.viscosity !== null) {
    checkLaw(plan.viscosity.law, '/viscosity/law', say);
    if (plan.sensitivityLaws.length < 3) {
      say(
        '/sensitivityLaws',
        'name at least three laws: the split depends on the law more than on the measurement',
      );
    }
    if (plan.flow === 'brachialBloodFlow') {
      say(
        '/flow',
        'the split needs the flow of tissue (forearmBloodFlow); a conduit’s flow has another dimension',
      );
    }
  }
  plan.sensitivityLaws.forEach((law, index) => checkLaw(law, `/sensitivityLaws/${index}`, say));
  if (plan.equivalence !== null && plan.design !== 'crossover-2x2') {
    say('/equivalence', 'two one-sided tests belong to crossovers here; leave it empty');
  }
  if (plan.equivalence !== null && !used.slice(0, -1).includes(plan.equivalence.outcome)) {
    say('/equivalence/outcome', 'is none of the plan’s outcomes; add it to them');
  }
  return problems;
}

function checkLaw(chosen: ChosenLaw, pointer: string, say: (pointer: string, message: string) => void): void {
  const law = viscosityLaws.find(({ id }) => id === chosen.law);
  if (law === undefined) {
    say(
      `${pointer}/law`,
      `is no law that knows haematocrit; use one of ${viscosityLaws.map(({ id }) => id).join(', ')}`,
    );
    return;
  }
  for (const name of ['shearRate', 'diameter'] as const) {
    if (chosen[name] !== undefined && !law.parameters.some((parameter) => parameter.name === name)) {
      say(`${pointer}/${name}`, `is no parameter of ${law.name}`);
    }
  }
}
