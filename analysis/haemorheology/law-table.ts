import {
  bulkLawCautions,
  haematocritCautions,
  highShearCautions,
  quemadaCautions,
  walburnSchneckCautions,
} from './ranges.ts';
import { brinkmanRelativeViscosity } from './viscosity/brinkman-relative-viscosity.ts';
import { deSimoneViscosity } from './viscosity/de-simone-viscosity.ts';
import { lichtmanViscosity } from './viscosity/lichtman-viscosity.ts';
import { priesBulkRelativeViscosity } from './viscosity/pries-bulk-relative-viscosity.ts';
import { priesInVitroRelativeViscosity } from './viscosity/pries-in-vitro-relative-viscosity.ts';
import { priesInVivoRelativeViscosity } from './viscosity/pries-in-vivo-relative-viscosity.ts';
import { quemadaCokeletViscosity } from './viscosity/quemada-cokelet-viscosity.ts';
import { quemadaDasViscosity } from './viscosity/quemada-das-viscosity.ts';
import { quemadaFixedViscosity } from './viscosity/quemada-fixed-viscosity.ts';
import { snyderViscosity } from './viscosity/snyder-viscosity.ts';
import { usualProteinMinusAlbumin, walburnSchneckViscosity } from './viscosity/walburn-schneck-viscosity.ts';
import { convert } from '../units/convert.ts';
import { quantity } from '../units/quantity.ts';
import type { Quantity } from '../units/quantity.ts';
import type { LawFormula, LawOptions, LawParameter } from './viscosity-law.ts';

const shearRate = (value: number): LawParameter => ({ name: 'shearRate', unit: '/s', default: value });
const diameter = (value: number): LawParameter => ({ name: 'diameter', unit: 'um', default: value });

const percent = (h: Quantity<'1'>) => convert(h, '1', '%');
const rate = (options: LawOptions) => quantity<'/s'>(options.shearRate!);
const bore = (options: LawOptions) => quantity<'um'>(options.diameter!);
const bulk = (options: LawOptions) =>
  bulkLawCautions(options.diameter === undefined ? undefined : bore(options));
const highShear = (options: LawOptions, least: number) =>
  highShearCautions(options.shearRate === undefined ? undefined : rate(options), least);

/** The formulas behind the laws, with what each takes and where it holds. */
export const lawTable: readonly LawFormula[] = [
  {
    id: 'pries-bulk',
    name: 'Pries, wide vessels',
    parameters: [],
    range: { low: 0, high: 0.9 },
    usesPlasmaViscosity: true,
    source: 'Pries et al. 1992, Am J Physiol 263:H1770, limit for an infinite diameter',
    compute: (h, plasma) => plasma * priesBulkRelativeViscosity(h),
    cautions: (h, options) => [...bulk(options), ...highShear(options, 50), h >= 0.65 && 'TRAPPED_PLASMA'],
  },
  {
    id: 'pries-in-vitro',
    name: 'Pries, glass tubes',
    parameters: [diameter(100)],
    range: { low: 0, high: 0.9 },
    usesPlasmaViscosity: true,
    source: 'Pries et al. 1992, Am J Physiol 263:H1770',
    compute: (h, plasma, options) => plasma * priesInVitroRelativeViscosity(h, bore(options)),
    cautions: (h, options) => [...highShear(options, 50), h >= 0.65 && 'TRAPPED_PLASMA'],
  },
  {
    id: 'pries-in-vivo',
    name: 'Pries, living microvessels',
    parameters: [diameter(30)],
    range: { low: 0, high: 0.9 },
    usesPlasmaViscosity: true,
    source: 'Pries et al. 1994, Circ Res 75:904',
    compute: (h, plasma, options) => plasma * priesInVivoRelativeViscosity(h, bore(options)),
    cautions: (h, options) => [
      options.diameter! < 4 && 'DIAMETER_RANGE',
      ...highShear(options, 50),
      h >= 0.65 && 'TRAPPED_PLASMA',
    ],
  },
  {
    id: 'quemada-cokelet',
    name: 'Quemada, coefficients of Cokelet',
    parameters: [shearRate(200)],
    range: { low: 0.1, high: 0.65 },
    usesPlasmaViscosity: true,
    source: 'Quemada 1978; Hund et al. 2017, Fluids 2:10, table 2',
    compute: (h, plasma, options) => quemadaCokeletViscosity(h, rate(options), plasma),
    cautions: (h, options) => [...bulk(options), ...quemadaCautions(h, options.shearRate!)],
  },
  {
    id: 'quemada-das',
    name: 'Quemada, coefficients of Das',
    parameters: [shearRate(200)],
    range: { low: 0.1, high: 0.65 },
    usesPlasmaViscosity: true,
    source: 'Quemada 1978; Hund et al. 2017, Fluids 2:10, table 2',
    compute: (h, plasma, options) => quemadaDasViscosity(h, rate(options), plasma),
    cautions: (h, options) => [...bulk(options), ...haematocritCautions(h, 0.1, 0.65)],
  },
  {
    id: 'quemada-fixed',
    name: 'Quemada, fixed parameters',
    parameters: [shearRate(200)],
    range: { low: 0.4, high: 0.5 },
    usesPlasmaViscosity: true,
    source: 'Quemada 1978; parameters from one public code',
    compute: (h, plasma, options) => quemadaFixedViscosity(h, rate(options), plasma),
    cautions: (h, options) => [...bulk(options), ...haematocritCautions(h, 0.4, 0.5)],
  },
  {
    id: 'walburn-schneck',
    name: 'Walburn and Schneck',
    parameters: [
      shearRate(200),
      { name: 'proteinMinusAlbumin', unit: 'g/L', default: usualProteinMinusAlbumin },
    ],
    range: { low: 0.35, high: 0.5 },
    usesPlasmaViscosity: false,
    source: 'Walburn & Schneck 1976, Biorheology 13:201',
    compute: (h, _plasma, options) =>
      walburnSchneckViscosity(percent(h), rate(options), quantity(options.proteinMinusAlbumin!)),
    cautions: (h, options) => [...bulk(options), ...walburnSchneckCautions(h, options.shearRate!)],
  },
  {
    id: 'snyder',
    name: 'Snyder, high shear',
    parameters: [{ name: 'temperature', unit: 'Cel', default: 37 }],
    range: { low: 0, high: 0.75 },
    usesPlasmaViscosity: false,
    source: 'Snyder 1971 as coded in one public repository',
    compute: (h, _plasma, options) => snyderViscosity(percent(h), quantity(options.temperature!)),
    cautions: (h, options) => [
      ...bulk(options),
      ...highShear(options, 100),
      (options.temperature! < 20 || options.temperature! > 40) && 'TEMPERATURE_RANGE',
      h >= 0.65 && 'TRAPPED_PLASMA',
    ],
  },
  {
    id: 'lichtman',
    name: 'Lichtman, regression',
    parameters: [],
    range: { low: 0.2, high: 0.65 },
    usesPlasmaViscosity: false,
    source: 'figure of Lichtman 1987 by way of an algorithm page',
    compute: (h) => lichtmanViscosity(percent(h)),
    cautions: (h, options) => [
      ...bulk(options),
      ...highShear(options, 100),
      ...haematocritCautions(h, 0.2, 0.65),
    ],
  },
  {
    id: 'de-simone',
    name: 'de Simone, 208 /s, constant outside the bracket',
    parameters: [{ name: 'totalProtein', unit: 'g/dL', default: 7.2 }],
    range: { low: 0.2, high: 0.65 },
    usesPlasmaViscosity: false,
    source: 'de Simone et al. 1990, Circulation 81:107, grouping inferred',
    compute: (h, _plasma, options) => deSimoneViscosity(percent(h), quantity(options.totalProtein!)),
    cautions: (h, options) => ['DESIMONE_VARIANT', ...bulk(options), ...haematocritCautions(h, 0.2, 0.65)],
  },
  {
    id: 'brinkman',
    name: 'Brinkman, rigid spheres',
    parameters: [],
    range: { low: 0, high: 0.3 },
    usesPlasmaViscosity: true,
    source: 'Brinkman 1952; Roscoe 1952',
    compute: (h, plasma) => plasma * brinkmanRelativeViscosity(h),
    cautions: (h, options) => [...bulk(options), h > 0.3 && 'RIGID_SPHERES'],
  },
];
