import { describe, expect, it } from 'vitest';
import { checkStudyPlan } from '#analysis/study/check-study-plan.ts';
import type { MeasuredQuantity } from '#schemas/protocol/protocol.ts';
import { planTemplate, type PlanBasis } from './plan-template.ts';

const basis = (design: PlanBasis['design'], quantities: MeasuredQuantity[]): PlanBasis => ({
  title: 'Alder against birch',
  design,
  conditions: [
    { key: 'alder', label: 'Alder' },
    { key: 'birch', label: 'Birch' },
  ],
  visitTypes: [
    {
      key: 'v',
      label: 'Visit',
      targetDay: 1,
      windowBefore: 0,
      windowAfter: 0,
      runSheet: [],
      measures: ['baseline', 'after'].flatMap((timePoint) =>
        quantities.map((quantity) => ({
          key: `${quantity}-${timePoint}`,
          timePoint,
          quantity,
          from: [],
          combine: 'only' as const,
        })),
      ),
    },
  ],
});
const dilution: MeasuredQuantity[] = ['meanArterialPressure', 'forearmBloodFlow', 'haematocrit'];

describe('planTemplate', () => {
  it.each(['crossover-2x2', 'parallel', 'single-group'] as const)('can be signed as it is: %s', (design) => {
    expect(checkStudyPlan(planTemplate(basis(design, dilution), 7))).toEqual([]);
    expect(checkStudyPlan(planTemplate(basis(design, ['brachialBloodFlow']), 7))).toEqual([]);
  });

  it('plans the split only where blood is sampled', () => {
    expect(planTemplate(basis('crossover-2x2', dilution), 7).secondary).toEqual(['viscosity', 'hindrance']);
    expect(planTemplate(basis('crossover-2x2', ['forearmBloodFlow']), 7).viscosity).toBeNull();
  });

  it('uses the plasma viscosity that is measured', () => {
    const plan = planTemplate(basis('crossover-2x2', [...dilution, 'plasmaViscosity']), 7);
    expect(plan.viscosity?.plasma).toBe('measured');
  });
});
