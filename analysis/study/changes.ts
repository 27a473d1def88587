import { viscosityLawNamed } from '../haemorheology/viscosity-laws.ts';
import { DomainError } from '../units/errors.ts';
import { quantity } from '../units/quantity.ts';
import type { StudyData } from './study-data.ts';
import type { ChosenLaw, StudyPlan } from './study-plan.ts';

/** The quantities of one participant at one time of one period. */
export interface Moment {
  /** mm[Hg] */
  pressure: number;
  /** mL/min/dL, or mL/min for a conduit's flow */
  flow: number;
  /** pressure / flow */
  resistance: number;
  /** flow / pressure */
  conductance: number;
  /** mPa.s; null where the plan has no viscosity */
  viscosity: number | null;
  /** resistance / viscosity, in the product of their units; only its ratios are used */
  hindrance: number | null;
}

/** What happened in one period, from its own baseline. */
export interface PeriodChange {
  participant: string;
  period: number;
  condition: string;
  before: Moment;
  after: Moment;
}

export interface LeftOut {
  participant: string;
  reason: string;
}

export interface StudyChanges {
  changes: PeriodChange[];
  leftOut: LeftOut[];
  /** Codes of cautions that the law raised, with how many moments they concern. */
  cautions: { code: string; message: string; moments: number }[];
}

/**
 * Computes every participant's changes from the measures of a cut.
 * Someone who lacks what the plan needs is left out whole, with the first reason found: never silently.
 */
export function studyChanges(
  plan: StudyPlan,
  data: StudyData,
  law = plan.viscosity?.law ?? null,
): StudyChanges {
  const excluded = new Map(data.excluded.map(({ participant, reason }) => [participant, reason]));
  const cautions = new Map<string, { code: string; message: string; moments: number }>();
  const changes: PeriodChange[] = [];
  const leftOut: LeftOut[] = [];
  for (const { participant } of data.participants) {
    const reason = excluded.get(participant);
    const found = reason === undefined ? periodsOf(plan, data, participant, law, cautions) : { reason };
    if ('reason' in found) leftOut.push({ participant, reason: found.reason });
    else changes.push(...found.periods);
  }
  return { changes, leftOut, cautions: [...cautions.values()] };
}

function periodsOf(
  plan: StudyPlan,
  data: StudyData,
  participant: string,
  law: ChosenLaw | null,
  cautions: StudyChanges['cautions'] extends (infer C)[] ? Map<string, C> : never,
): { periods: PeriodChange[] } | { reason: string } {
  const rows = data.measures.filter((row) => row.participant === participant);
  const wanted = plan.design === 'crossover-2x2' ? [1, 2] : [1];
  const periods: PeriodChange[] = [];
  for (const period of wanted) {
    const here = rows.filter((row) => row.period === period);
    const condition = here[0]?.condition;
    if (condition === undefined)
      return { reason: wanted.length > 1 ? `period ${period} missed` : 'no visit' };
    const moments: Moment[] = [];
    for (const timePoint of [plan.baselineTimePoint, plan.timePoint]) {
      const values = new Map(
        here.filter((row) => row.timePoint === timePoint).map((row) => [row.quantity, row]),
      );
      const place = wanted.length > 1 ? `period ${period}, ${timePoint}` : timePoint;
      const moment = momentOf(plan, values, law, cautions);
      if (typeof moment === 'string') return { reason: `${place}: ${moment}` };
      moments.push(moment);
    }
    periods.push({ participant, period, condition, before: moments[0]!, after: moments[1]! });
  }
  return { periods };
}

function momentOf(
  plan: StudyPlan,
  values: ReadonlyMap<string, { value: number | null; reason: string | null }>,
  law: ChosenLaw | null,
  cautions: Map<string, { code: string; message: string; moments: number }>,
): Moment | string {
  const needed = ['meanArterialPressure', plan.flow];
  if (law !== null) needed.push('haematocrit');
  if (law !== null && plan.viscosity?.plasma === 'measured') needed.push('plasmaViscosity');
  const numbers: Record<string, number> = {};
  for (const name of needed) {
    const row = values.get(name);
    if (row?.value == null) return `${words[name]} missing${row?.reason ? ` (${row.reason})` : ''}`;
    if (!(row.value > 0)) return `${words[name]} is ${row.value}, which has no logarithm`;
    numbers[name] = row.value;
  }
  const pressure = numbers['meanArterialPressure']!;
  const flow = numbers[plan.flow]!;
  const moment = { pressure, flow, resistance: pressure / flow, conductance: flow / pressure };
  if (law === null || plan.viscosity === null) return { ...moment, viscosity: null, hindrance: null };
  const plasma = plan.viscosity.plasma === 'measured' ? numbers['plasmaViscosity']! : plan.viscosity.plasma;
  try {
    const { law: id, ...options } = law;
    const computed = viscosityLawNamed(id).viscosity(
      quantity(numbers['haematocrit']!),
      quantity(plasma),
      options,
    );
    for (const { code, message } of computed.cautions) {
      cautions.set(code, { code, message, moments: (cautions.get(code)?.moments ?? 0) + 1 });
    }
    return { ...moment, viscosity: computed.viscosity, hindrance: moment.resistance / computed.viscosity };
  } catch (error) {
    // Outside its domain a law gives no number; the participant is left out with the law's own sentence.
    if (error instanceof DomainError) return error.message;
    throw error;
  }
}

const words: Record<string, string> = {
  meanArterialPressure: 'mean arterial pressure',
  forearmBloodFlow: 'forearm blood flow',
  brachialBloodFlow: 'brachial blood flow',
  haematocrit: 'haematocrit',
  plasmaViscosity: 'plasma viscosity',
};
