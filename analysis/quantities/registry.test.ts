import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cautionCodes } from '../cautions/cautions.ts';
import { parseUnit } from '../units/parse-unit.ts';
import { DomainError, UnitError } from '../units/errors.ts';
import published from '../reference/haemodynamics/published.json' with { type: 'json' };
import type { GivenInput } from './inputs.ts';
import { InputError } from './input-error.ts';
import { listQuantities } from './list-quantities.ts';
import { derive, quantities, quantityNamed } from './registry.ts';

const fvr = { map: { value: 90, unit: 'mm[Hg]' }, fbf: { value: 2.5, unit: 'mL/min/dL' } };

describe('the registry', () => {
  it('finds a quantity by key and by spelled-out name', () => {
    expect(quantityNamed('fvr')).toBe(quantityNamed('forearmVascularResistance'));
    expect(quantityNamed('map_third')?.name).toBe('meanArterialPressureOneThird');
    expect(quantityNamed('viscosity_quemada_cokelet')?.name).toBe('bloodViscosityQuemadaCokelet');
    expect(quantityNamed('hindrance')?.name).toBe('vascularHindrance');
    expect(quantityNamed('constructor')).toBeUndefined();
  });

  it('has unique keys and names, readable units, formulas and sources', () => {
    const listed = listQuantities();
    expect(new Set(listed.flatMap(({ key, name }) => [key, name])).size).toBeGreaterThanOrEqual(
      listed.length * 2 - 5,
    );
    expect(new Set(listed.map(({ name }) => name)).size).toBe(quantities.size);
    for (const { key, formula, source, inputs } of listed) {
      expect(formula, key).not.toBe('');
      expect(source, key).not.toBe('');
      expect(new Set(inputs.map(({ name }) => name)).size, key).toBe(inputs.length);
      for (const { unit } of inputs)
        expect(() => parseUnit(unit === 'Cel' ? 'K' : unit), `${key} ${unit}`).not.toThrow();
    }
  });

  it('takes inputs by key or by spelled-out name, in any convertible unit', () => {
    const named = derive('forearmVascularResistance', {
      meanArterialPressure: { value: 90 * 0.133322387415, unit: 'kPa' },
      forearmBloodFlow: { value: 2.5 / 60, unit: '%/s' },
    });
    expect(named.value).toBeCloseTo(36, 10);
    expect(named.unit).toBe('mm[Hg].min.dL/mL');
    expect(named.cautions.map(({ code }) => code)).toEqual(['VENOUS_PRESSURE_NEGLECTED']);
  });

  it('gives each caution a sentence and a severity', () => {
    for (const [severity, message] of Object.values(cautionCodes)) {
      expect(['caution', 'info']).toContain(severity);
      expect(message).toMatch(/^[A-Z0-9].*\.$/);
    }
  });
});

describe('inputs that cannot be used', () => {
  it.each<[string, string, Record<string, unknown>, string, string | undefined]>([
    ['an unknown quantity', 'fvrr', fvr, 'unknown_quantity', undefined],
    ['a missing input', 'fvr', { map: fvr.map }, 'missing_input', 'fbf'],
    ['an input of another quantity', 'fvr', { ...fvr, cvp: fvr.map }, 'unknown_input', 'cvp'],
    [
      'an input given under both names',
      'fvr',
      { ...fvr, forearmBloodFlow: fvr.fbf },
      'invalid_input',
      'forearmBloodFlow',
    ],
    ['a number without unit', 'fvr', { ...fvr, map: { value: 90 } }, 'invalid_input', 'map'],
    ['text for a number', 'fvr', { ...fvr, map: { value: '90', unit: 'mm[Hg]' } }, 'invalid_input', 'map'],
    ['a bare number', 'fvr', { ...fvr, map: 90 }, 'invalid_input', 'map'],
    ['null', 'fvr', { ...fvr, map: null }, 'invalid_input', 'map'],
    [
      'a list for a single value',
      'fvr',
      { ...fvr, map: { value: [90], unit: 'mm[Hg]' } },
      'invalid_input',
      'map',
    ],
    ['a single value for a list', 'fbf_mean', { readings: fvr.fbf }, 'invalid_input', 'readings'],
    [
      'a hole in a list',
      'fbf_mean',
      { readings: { value: [2, null, 3], unit: 'mL/min/dL' } },
      'invalid_input',
      'readings[2]',
    ],
    ['another dimension', 'fvr', { ...fvr, map: { value: 90, unit: 'L/min' } }, 'unit_mismatch', 'map'],
    [
      'a unit that is no UCUM code',
      'fvr',
      { ...fvr, map: { value: 90, unit: 'mmHg' } },
      'unknown_unit',
      'map',
    ],
    ['a flow of another kind', 'fvr', { ...fvr, fbf: { value: 5, unit: 'L/min' } }, 'unit_mismatch', 'fbf'],
    [
      'a flag that is neither 0 nor 1',
      'fbf_from_percent_slope',
      { slope: { value: 0.05, unit: '%/s' }, hyperaemia_confirmed: { value: 2, unit: '1' } },
      'outside_domain',
      'hyperaemia_confirmed',
    ],
  ])('names %s', (_, quantity, inputs, code, argument) => {
    let caught: unknown;
    try {
      derive(quantity, inputs as Record<string, GivenInput>);
    } catch (error) {
      caught = error;
    }
    expect(caught).toMatchObject({ code, ...(argument && { argument }) });
    expect((caught as InputError).remedy).not.toBe('');
  });

  it('refuses every quantity one input too few', () => {
    for (const { key, inputs } of quantities.values()) {
      const required = Object.entries(inputs).filter(
        ([, input]) => input.arity !== 'optional' && input.default === undefined,
      );
      expect(required.length, key).toBeGreaterThan(0);
      expect(() => derive(key, {}), key).toThrow(InputError);
    }
  });

  it('answers any numbers with a finite value or a named error', () => {
    const cases = published.map(({ quantity, inputs }) => ({
      quantity,
      inputs: inputs as unknown as Record<string, GivenInput>,
    }));
    fc.assert(
      fc.property(
        fc.constantFrom(...cases),
        fc.infiniteStream(fc.double({ noNaN: true, noDefaultInfinity: true })),
        ({ quantity, inputs }, numbers) => {
          const changed = Object.fromEntries(
            Object.entries(inputs).map(([key, input]) => [
              key,
              { ...input, value: numbers.next().value as number },
            ]),
          );
          try {
            const { value } = derive(quantity, changed);
            return Number.isFinite(value);
          } catch (error) {
            return error instanceof DomainError || error instanceof UnitError || error instanceof InputError;
          }
        },
      ),
      { numRuns: 2000 },
    );
  });
});
