import { describe, expect, it } from 'vitest';
import { analyse } from '../statistics/analyse.ts';
import { checkStudyPlan } from './check-study-plan.ts';
import { runStudy } from './run-study.ts';
import type { MeasureRow, StudyData } from './study-data.ts';
import type { StudyPlan } from './study-plan.ts';

const plan: StudyPlan = {
  title: 'Haemodilution against sham',
  estimand:
    'Ratio of geometric means of forearm vascular resistance after against before, exchange over sham.',
  design: 'crossover-2x2',
  conditions: ['dilution', 'sham'],
  flow: 'forearmBloodFlow',
  baselineTimePoint: 'baseline',
  timePoint: 'after',
  viscosity: { law: { law: 'quemada-cokelet', shearRate: 200 }, plasma: 'measured' },
  primary: 'resistance',
  secondary: ['viscosity', 'hindrance'],
  method: 'crossover_2x2',
  equivalence: { outcome: 'hindrance', lower: 0.85, upper: 1 / 0.85 },
  confidence: 0.95,
  multiplicity: 'holm',
  missingData: 'Complete participants.',
  sensitivityLaws: [
    { law: 'pries-bulk' },
    { law: 'pries-in-vitro', diameter: 100 },
    { law: 'quemada-das', shearRate: 200 },
  ],
  seed: 20260409,
};

/** Invented numbers; only what must follow from them by algebra is expected below. */
function invented(participants: number): StudyData {
  const rows: MeasureRow[] = [];
  for (let i = 0; i < participants; i += 1) {
    for (const period of [1, 2]) {
      const condition = (i + period) % 2 === 0 ? 'dilution' : 'sham';
      for (const timePoint of ['baseline', 'after']) {
        const diluted = condition === 'dilution' && timePoint === 'after';
        const wobble = Math.sin(1 + i * 7 + period * 3 + (timePoint === 'after' ? 11 : 0));
        const put = (quantity: string, value: number): number =>
          rows.push({ participant: `P${i}`, period, condition, timePoint, quantity, value, reason: null });
        put('meanArterialPressure', 92 + 2 * wobble - (diluted ? 1.5 : 0));
        put('forearmBloodFlow', (diluted ? 3 : 2.3) * Math.exp(0.08 * wobble));
        put('haematocrit', (diluted ? 0.44 : 0.52) + 0.004 * wobble);
        put('plasmaViscosity', (diluted ? 1.25 : 1.3) + 0.01 * wobble);
      }
    }
  }
  const conditions = [
    { key: 'dilution', label: 'haemodilution' },
    { key: 'sham', label: 'sham' },
  ];
  const ids = Array.from({ length: participants }, (_, i) => ({ participant: `P${i}`, sequence: null }));
  return { conditions, participants: ids, measures: rows, excluded: [] };
}

describe('runStudy', () => {
  it('splits resistance into parts that add up, for each participant and the group', () => {
    const { participants, split } = runStudy(plan, invented(24));
    for (const { total, rheological, geometric } of participants) {
      expect((rheological ?? NaN) + (geometric ?? NaN)).toBeCloseTo(total, 12);
    }
    expect(split!.rheological.logEstimate + split!.geometric.logEstimate).toBeCloseTo(
      split!.total.logEstimate,
      12,
    );
  });

  it('reports what the analysis contract’s crossover says of the same log-changes', () => {
    const result = runStudy(plan, invented(24));
    const rows = result.table.map(
      (row) => `${row.participant},${row.period},${row.condition},${row.log_change_resistance}`,
    );
    const direct = analyse(
      {
        method: 'crossover_2x2',
        outcome: 'y',
        subject: 's',
        condition: 'c',
        levels: ['dilution', 'sham'],
        period: 'p',
        period_levels: ['1', '2'],
      },
      ['s,p,c,y', ...rows, ''].join('\n'),
    );
    expect(result.effects[0]!.logEstimate).toBe(direct.estimates['treatment_effect']);
    expect(result.effects[0]!.pValue).toBe(direct.estimates['treatment_p_value']);
  });

  it('gives the same bytes for the same plan and data', () => {
    expect(JSON.stringify(runStudy(plan, invented(12)))).toBe(JSON.stringify(runStudy(plan, invented(12))));
  });

  it('leaves out whole who misses a period or a measurement, each with a reason', () => {
    const data = invented(12);
    const measures = data.measures
      .filter(({ participant, period }) => !(participant === 'P3' && period === 2))
      .map((row) =>
        row.participant === 'P5' &&
        row.quantity === 'haematocrit' &&
        row.period === 1 &&
        row.timePoint === 'after'
          ? { ...row, value: null, reason: 'tube broken' }
          : row,
      );
    const { leftOut, flow } = runStudy(plan, { ...data, measures });
    expect(leftOut).toEqual([
      { participant: 'P3', reason: 'period 2 missed' },
      { participant: 'P5', reason: 'period 1, after: haematocrit missing (tube broken)' },
    ]);
    expect(flow).toEqual({ allocated: 12, analysed: 10 });
  });

  it('shows the split under the plan’s law and every sensitivity law', () => {
    const { sensitivity } = runStudy(plan, invented(24));
    expect(sensitivity.laws).toHaveLength(4);
    // The order of haemodynamics reference 6.5: narrow vessels give viscosity the smaller part.
    const share = (part: string): number =>
      sensitivity.laws.find(({ label }) => label.includes(part))!.shareOfTotal;
    expect(share('100 µm')).toBeLessThan(share('wide vessels'));
    expect(share('wide vessels')).toBeLessThan(share('Cokelet'));
  });

  it('says the words instead of shares when resistance hardly changes', () => {
    const data = invented(24);
    const measures = data.measures.map((row) =>
      row.quantity === 'forearmBloodFlow' && row.condition === 'dilution' && row.timePoint === 'after'
        ? { ...row, value: row.value! * (2.3 / 3) * (90.5 / 92) }
        : row,
    );
    const { split, verdict } = runStudy({ ...plan, equivalence: null }, { ...data, measures });
    expect(split!.shares.shown).toBe(false);
    expect(split!.share).toBeNull();
    expect(verdict).toBe('tone-changed');
  });

  it('claims unchanged tone only inside the signed margin', () => {
    expect(runStudy(plan, invented(24)).verdict).toBe('rheological-tone-unchanged');
    const narrow = { ...plan, equivalence: { outcome: 'hindrance' as const, lower: 0.9999, upper: 1.0001 } };
    expect(runStudy(narrow, invented(24)).verdict).not.toBe('rheological-tone-unchanged');
  });
});

describe('checkStudyPlan', () => {
  it('finds nothing in a plan that fits its design', () => {
    expect(checkStudyPlan(plan)).toEqual([]);
  });

  // proves SR-03
  it('refuses a method that ignores the design', () => {
    expect(checkStudyPlan({ ...plan, method: 'paired_t' })).toEqual([
      { pointer: '/method', message: expect.stringContaining('crossover_2x2') as string },
    ]);
  });

  it('refuses a split by a law that knows no haematocrit, and one by fewer than three laws beside it', () => {
    const carreau = { ...plan, viscosity: { law: { law: 'carreau' }, plasma: 1.2 } } as StudyPlan;
    expect(checkStudyPlan(carreau).map(({ pointer }) => pointer)).toEqual(['/viscosity/law/law']);
    const few = { ...plan, sensitivityLaws: plan.sensitivityLaws.slice(0, 2) };
    expect(checkStudyPlan(few).map(({ pointer }) => pointer)).toEqual(['/sensitivityLaws']);
  });

  it('refuses viscosity outcomes without a law', () => {
    const none = { ...plan, viscosity: null };
    expect(checkStudyPlan(none).map(({ pointer }) => pointer)).toContain('/viscosity');
  });
});
