import { haematocritFromHaemoglobin } from '../haemorheology/haematocrit/haematocrit-from-haemoglobin.ts';
import { haematocritTransportIndex } from '../haemorheology/haematocrit/haematocrit-transport-index.ts';
import { meanCellHaemoglobinConcentration } from '../haemorheology/haematocrit/mean-cell-haemoglobin-concentration.ts';
import { meanHaematocritOfDuplicates } from '../haemorheology/haematocrit/mean-haematocrit-of-duplicates.ts';
import { trappedPlasmaCorrectedHaematocrit } from '../haemorheology/haematocrit/trapped-plasma-corrected-haematocrit.ts';
import { wholeBodyHaematocrit } from '../haemorheology/haematocrit/whole-body-haematocrit.ts';
import { bloodVolumeAfter } from '../haemorheology/plasma-volume/blood-volume-after.ts';
import { bloodVolumeChange } from '../haemorheology/plasma-volume/blood-volume-change.ts';
import { cellVolumeAfter } from '../haemorheology/plasma-volume/cell-volume-after.ts';
import { cellVolumeChange } from '../haemorheology/plasma-volume/cell-volume-change.ts';
import { plasmaVolumeChange } from '../haemorheology/plasma-volume/plasma-volume-change.ts';
import type { VolumeEvents } from '../haemorheology/plasma-volume/red-cell-mass.ts';
import { haematocrit, haematocritPercent, haemoglobin } from './common-inputs.ts';
import { define } from './define.ts';
import { defaulted, optional, single } from './inputs.ts';
import { convert } from '../units/convert.ts';
import type { Quantity } from '../units/quantity.ts';

const tube = (name: string, about: string) => single('%', name, about, '5 to 75 %', { check: 'haematocrit' });
const samples = {
  hb_before: { ...haemoglobin, name: 'haemoglobinBefore', about: 'haemoglobin before' },
  hb_after: { ...haemoglobin, name: 'haemoglobinAfter', about: 'haemoglobin after' },
  blood_loss: optional('mL', 'bloodLoss', 'blood lost, drawn or exchanged between the samples', '0'),
  transfusion: optional('mL', 'transfusion', 'red cells given between the samples', '0'),
};
const haematocrits = {
  hct_before: { ...haematocrit, name: 'haematocritBefore', about: 'haematocrit before' },
  hct_after: { ...haematocrit, name: 'haematocritAfter', about: 'haematocrit after' },
};
const events = (given: {
  readonly blood_loss: Quantity<'mL'> | undefined;
  readonly transfusion: Quantity<'mL'> | undefined;
}): VolumeEvents => ({
  ...(given.blood_loss !== undefined && { bloodLoss: given.blood_loss }),
  ...(given.transfusion !== undefined && { transfusion: given.transfusion }),
});
const dillCostill = 'Dill & Costill 1974, J Appl Physiol 37:247';
const constantMass = () => ['RED_CELL_MASS_CONSTANT'] as const;

/** Haematocrit, haemoglobin and changes of plasma volume. */
export const bloodQuantities = [
  define({
    key: 'hct_mean_of_duplicates',
    name: 'meanHaematocritOfDuplicates',
    title: 'Haematocrit of two tubes, or the median of three',
    inputs: {
      a: tube('tube1', 'first tube'),
      b: tube('tube2', 'second tube'),
      c: optional('%', 'tube3', 'third tube, when the first two differ', '5 to 75 %', {
        check: 'haematocrit',
      }),
    },
    unit: '%',
    formula: '(a + b) / 2; with c the median',
    source: 'common practice',
    compute: ({ a, b, c }) => meanHaematocritOfDuplicates(a, b, c),
    // A difference of exactly 0.5 is accepted; binary rounding must not decide it.
    cautions: ({ a, b, c }, value) => [
      c === undefined && Math.abs(a - b) > 0.5 + 1e-9 && 'DUPLICATES_DIFFER',
      value >= 65 && 'TRAPPED_PLASMA',
    ],
  }),
  define({
    key: 'hct_trapped_plasma_corrected',
    name: 'trappedPlasmaCorrectedHaematocrit',
    title: 'Haematocrit corrected for trapped plasma',
    inputs: {
      hct_percent: haematocritPercent,
      trapped_fraction: single('1', 'trappedFraction', 'trapped fraction of the cell column', '0 to 0.3'),
    },
    unit: '%',
    formula: 'hct_percent * (1 - trapped_fraction)',
    source: 'England et al. 1972',
    compute: (g) => trappedPlasmaCorrectedHaematocrit(g.hct_percent, g.trapped_fraction),
    cautions: () => ['CORRECTED_HAEMATOCRIT'],
  }),
  define({
    key: 'hct_from_hb_rule',
    name: 'haematocritFromHaemoglobin',
    title: 'Haematocrit expected from haemoglobin, rule of three',
    inputs: { hb: haemoglobin },
    unit: '%',
    formula: '3 * hb',
    source: 'common practice',
    compute: ({ hb }) => haematocritFromHaemoglobin(hb),
    cautions: () => ['ENTRY_CHECK_ONLY'],
  }),
  define({
    key: 'mchc',
    name: 'meanCellHaemoglobinConcentration',
    title: 'Mean cell haemoglobin concentration',
    inputs: { hb: haemoglobin, hct_percent: haematocritPercent },
    unit: 'g/dL',
    formula: '100 * hb / hct_percent',
    source: 'definition',
    compute: ({ hb, hct_percent }) => meanCellHaemoglobinConcentration(hb, hct_percent),
    cautions: (_, mchc) => [(mchc > 40 || mchc < 25) && 'MCHC_IMPLAUSIBLE'],
  }),
  define({
    key: 'hct_fraction_to_percent',
    name: 'haematocritInPercent',
    title: 'Haematocrit from fraction to percent',
    inputs: { hct: { ...haematocrit, unit: 'L/L' as const } },
    unit: '%',
    formula: '100 * hct',
    source: 'definition',
    compute: ({ hct }) => convert(hct, 'L/L', '%'),
  }),
  define({
    key: 'whole_body_hct',
    name: 'wholeBodyHaematocrit',
    title: 'Whole-body haematocrit from the venous one',
    inputs: {
      venous_hct: { ...haematocrit, name: 'venousHaematocrit', about: 'venous haematocrit' },
      f_cell: defaulted(single('1', 'cellRatio', 'F-cell ratio', '0.8 to 1'), 0.91),
    },
    unit: '1',
    shownIn: () => 'L/L',
    formula: 'f_cell * venous_hct',
    source: 'algorithm page',
    compute: (g) => wholeBodyHaematocrit(g.venous_hct, g.f_cell),
  }),
  define({
    key: 'hct_transport_index',
    name: 'haematocritTransportIndex',
    title: 'Haematocrit over relative viscosity',
    inputs: {
      hct: haematocrit,
      relative_viscosity: single('1', 'relativeViscosity', 'relative viscosity', 'at least 1'),
    },
    unit: '1',
    formula: 'hct / relative_viscosity',
    source: 'idea of Chien 1975',
    compute: (g) => haematocritTransportIndex(g.hct, g.relative_viscosity),
    cautions: () => ['NOT_A_TARGET'],
  }),
  define({
    key: 'dill_costill_bv',
    name: 'bloodVolumeAfter',
    title: 'Blood volume after, per 100 mL before',
    inputs: samples,
    unit: 'mL',
    formula: '100 * hb_before / hb_after',
    source: dillCostill,
    compute: (g) => bloodVolumeAfter(g.hb_before, g.hb_after, events(g)),
    cautions: constantMass,
  }),
  define({
    key: 'dill_costill_bv_change',
    name: 'bloodVolumeChange',
    title: 'Change of blood volume',
    inputs: samples,
    unit: '%',
    formula: '100 * hb_before / hb_after - 100',
    source: dillCostill,
    compute: (g) => bloodVolumeChange(g.hb_before, g.hb_after, events(g)),
    cautions: constantMass,
  }),
  define({
    key: 'dill_costill_cv',
    name: 'cellVolumeAfter',
    title: 'Red-cell volume after, per 100 mL of blood before',
    inputs: { ...samples, hct_after: haematocrits.hct_after },
    unit: 'mL',
    formula: '100 * hb_before / hb_after * hct_after',
    source: dillCostill,
    compute: (g) => cellVolumeAfter(g.hb_before, g.hb_after, g.hct_after, events(g)),
    cautions: constantMass,
  }),
  define({
    key: 'dill_costill_cv_change',
    name: 'cellVolumeChange',
    title: 'Change of red-cell volume',
    inputs: { ...samples, ...haematocrits },
    unit: '%',
    formula: '100 * (hb_before / hb_after * hct_after / hct_before - 1)',
    source: dillCostill,
    compute: (g) => cellVolumeChange(g.hb_before, g.hb_after, g.hct_before, g.hct_after, events(g)),
    cautions: constantMass,
  }),
  define({
    key: 'dill_costill_pv_change',
    name: 'plasmaVolumeChange',
    title: 'Change of plasma volume',
    inputs: { ...samples, ...haematocrits },
    unit: '%',
    formula: '100 * (hb_before / hb_after * (1 - hct_after) / (1 - hct_before) - 1)',
    source: dillCostill,
    compute: (g) => plasmaVolumeChange(g.hb_before, g.hb_after, g.hct_before, g.hct_after, events(g)),
    cautions: constantMass,
  }),
];
