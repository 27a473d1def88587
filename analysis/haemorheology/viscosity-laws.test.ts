import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DomainError } from '../units/errors.ts';
import { quantity } from '../units/quantity.ts';
import { viscosityLawNamed, viscosityLaws } from './viscosity-laws.ts';
import { fahraeusRatio } from './viscosity/fahraeus-ratio.ts';
import { matraiStandardisedViscosity } from './viscosity/matrai-standardised-viscosity.ts';
import { merrillYieldStress } from './viscosity/merrill-yield-stress.ts';
import { priesBulkRelativeViscosity } from './viscosity/pries-bulk-relative-viscosity.ts';
import { priesInVitroRelativeViscosity } from './viscosity/pries-in-vitro-relative-viscosity.ts';
import { priesInVivoRelativeViscosity } from './viscosity/pries-in-vivo-relative-viscosity.ts';
import { quemadaCokeletViscosity } from './viscosity/quemada-cokelet-viscosity.ts';
import { temperatureCorrectedViscosity } from './viscosity/temperature-corrected-viscosity.ts';
import { waterViscosity } from './viscosity/water-viscosity.ts';

const plasma = quantity<'mPa.s'>(1.2);
const at = (id: string, h: number, options = {}) =>
  viscosityLawNamed(id).viscosity(quantity(h), plasma, options);

describe.each(viscosityLaws)('$id', (law) => {
  it('rises with haematocrit over its whole range', () => {
    const low = Math.max(law.range.low, 0.2);
    const high = Math.min(law.range.high, 0.65);
    fc.assert(
      fc.property(
        fc.double({ min: low, max: high - 0.01, noNaN: true }),
        (h) =>
          law.viscosity(quantity(h + 0.01), plasma).viscosity > law.viscosity(quantity(h), plasma).viscosity,
      ),
    );
  });

  it('moves with plasma viscosity exactly as it says', () => {
    const thin = law.viscosity(quantity(0.42), quantity(1.2)).viscosity;
    const thick = law.viscosity(quantity(0.42), quantity(1.8)).viscosity;
    expect(thick / thin).toBeCloseTo(law.usesPlasmaViscosity ? 1.5 : 1, 12);
  });

  it('has a range, a source and defaults for what it takes', () => {
    expect(law.range.low).toBeLessThan(law.range.high);
    expect(law.source.length).toBeGreaterThan(10);
    expect(Number.isInteger(law.version)).toBe(true);
    for (const parameter of law.parameters) expect(parameter.default).toBeGreaterThan(0);
  });

  it.each([-0.01, 1, 42, NaN])('refuses a haematocrit of %d', (h) => {
    expect(() => law.viscosity(quantity(h), plasma)).toThrow(DomainError);
  });
});

describe('bulk laws', () => {
  it.each(viscosityLaws.filter(({ id }) => !/vitro|vivo/.test(id)).map(({ id }) => id))(
    '%s: refused below 10 um, cautioned below 300 um',
    (id) => {
      expect(() => at(id, 0.42, { diameter: 9.99 })).toThrow(/diameter/);
      expect(at(id, 0.42, { diameter: 10 }).viscosity).toBeGreaterThan(1);
      expect(at(id, 0.42, { diameter: 100 }).cautions.map(({ code }) => code)).toContain('SMALL_VESSEL');
      expect(at(id, 0.42, { diameter: 500 }).cautions.map(({ code }) => code)).not.toContain('SMALL_VESSEL');
    },
  );
});

describe('Pries laws', () => {
  it('leave plasma alone at haematocrit 0 in glass', () => {
    expect(priesInVitroRelativeViscosity(quantity(0), quantity(30))).toBe(1);
    expect(priesBulkRelativeViscosity(quantity(0))).toBe(1);
  });

  it('tend to the bulk limit in wide tubes', () => {
    for (const h of [0.2, 0.45, 0.6]) {
      const wide = priesInVitroRelativeViscosity(quantity(h), quantity(1978));
      expect(Math.abs(wide / priesBulkRelativeViscosity(quantity(h)) - 1)).toBeLessThan(3e-3);
    }
  });

  it('have their minima where the papers put them', () => {
    // haemodynamics reference 5.1: in vitro 1.247 at 6.85 um, in vivo 2.281 at 48.3 um, at 0.45
    const lowest = (law: typeof priesInVitroRelativeViscosity, from: number, to: number) => {
      let best = { diameter: from, viscosity: Infinity };
      for (let diameter = from; diameter <= to; diameter += 0.05) {
        const viscosity: number = law(quantity(0.45), quantity(diameter));
        if (viscosity < best.viscosity) best = { diameter, viscosity };
      }
      return best;
    };
    const glass = lowest(priesInVitroRelativeViscosity, 4, 20);
    expect(glass.diameter).toBeCloseTo(6.85, 1);
    expect(glass.viscosity).toBeCloseTo(1.247, 3);
    const living = lowest(priesInVivoRelativeViscosity, 10, 100);
    expect(Math.abs(living.diameter - 48.3)).toBeLessThan(0.3);
    expect(living.viscosity).toBeCloseTo(2.281, 3);
  });

  it.each([3.2, 1979, NaN])('refuse a glass tube of %d um', (diameter) => {
    expect(() => priesInVitroRelativeViscosity(quantity(0.45), quantity(diameter))).toThrow(/diameter/);
  });

  it.each([2, 1.1, 0, Infinity])('refuse a living vessel of %d um', (diameter) => {
    expect(() => priesInVivoRelativeViscosity(quantity(0.45), quantity(diameter))).toThrow(/diameter/);
  });

  it('say nothing about slow flow', () => {
    expect(at('pries-bulk', 0.42, { shearRate: 49 }).cautions.map(({ code }) => code)).toContain(
      'SHEAR_RANGE',
    );
    expect(at('pries-bulk', 0.42, { shearRate: 50 }).cautions).toEqual([]);
  });
});

describe('Quemada law', () => {
  it('thins with shear', () => {
    const shear = fc.double({ min: 0.05, max: 1e3, noNaN: true });
    fc.assert(
      fc.property(
        shear,
        (g) =>
          quemadaCokeletViscosity(quantity(0.45), quantity(2 * g), plasma) <
          quemadaCokeletViscosity(quantity(0.45), quantity(g), plasma),
      ),
    );
  });

  it('is packed where the fixed parameters say so', () => {
    // k₀ H/2 = 1 at H = 2/4.33 = 0.4619 at rest
    expect(at('quemada-fixed', 0.46, { shearRate: 0 }).viscosity).toBeGreaterThan(1000);
    expect(() => at('quemada-fixed', 0.463, { shearRate: 0 })).toThrow(
      /below 0.4619, where the cells would be packed/,
    );
  });
});

describe('temperature', () => {
  it('goes there and back', () => {
    const there = temperatureCorrectedViscosity(quantity(1.6), quantity(25), quantity(37));
    expect(temperatureCorrectedViscosity(there, quantity(37), quantity(25))).toBeCloseTo(1.6, 14);
  });

  it('scales plasma from 25 to 37 Cel by 0.775', () => {
    // Laboratory range 1.50 to 1.72 at 25 Cel becomes 1.16 to 1.33 (haemodynamics reference 5.4)
    expect(temperatureCorrectedViscosity(quantity(1.5), quantity(25), quantity(37))).toBeCloseTo(1.16, 2);
    expect(temperatureCorrectedViscosity(quantity(1.72), quantity(25), quantity(37))).toBeCloseTo(1.33, 2);
  });

  it.each([9.9, 42.1])('is refused at %d Cel', (temperature) => {
    expect(() => temperatureCorrectedViscosity(quantity(1.2), quantity(temperature), quantity(37))).toThrow(
      /measuredAt/,
    );
    expect(() => waterViscosity(quantity(-0.1))).toThrow(/temperature/);
  });
});

describe('other laws', () => {
  it('standardise to the same haematocrit without change', () => {
    expect(matraiStandardisedViscosity(quantity(3.9), plasma, quantity(0.42), quantity(0.42))).toBeCloseTo(
      3.9,
      14,
    );
  });

  it('yield nothing below the critical haematocrit', () => {
    expect(merrillYieldStress(quantity(0.8), quantity(5), quantity(5))).toBe(0);
    expect(merrillYieldStress(quantity(0.8), quantity(3), quantity(5))).toBe(0);
  });

  it('put fewer cells into narrow tubes', () => {
    const diameters = fc.double({ min: 12, max: 900, noNaN: true });
    fc.assert(
      fc.property(
        diameters,
        (d) => fahraeusRatio(quantity(0.45), quantity(d)) < fahraeusRatio(quantity(0.45), quantity(d * 1.1)),
      ),
    );
  });

  it('name what may be used instead of an unknown law', () => {
    expect(() => viscosityLawNamed('einstein')).toThrow(/known viscosity law/);
  });
});
