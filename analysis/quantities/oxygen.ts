import { cardiacOutput } from '../haemodynamics/oxygen/cardiac-output.ts';
import { limbOxygenDelivery } from '../haemodynamics/oxygen/limb-oxygen-delivery.ts';
import { oxygenContent } from '../haemodynamics/oxygen/oxygen-content.ts';
import { oxygenDelivery } from '../haemodynamics/oxygen/oxygen-delivery.ts';
import { oxygenExtractionRatio } from '../haemodynamics/oxygen/oxygen-extraction-ratio.ts';
import { oxygenUptake } from '../haemodynamics/oxygen/oxygen-uptake.ts';
import { cardiacOutputInput, forearmBloodFlow, haemoglobin, heartRate } from './common-inputs.ts';
import { define } from './define.ts';
import { defaulted, single } from './inputs.ts';
import { convert } from '../units/convert.ts';

const content = (name: string, about: string) => single('mL/dL', name, about, 'at least 0');
const contentInputs = {
  hb: haemoglobin,
  sat: single('1', 'saturation', 'oxygen saturation', '0 to 1', { check: 'saturation' }),
  hufner: single(
    'mL/g',
    'huefnerConstant',
    "the study's Hüfner constant (1.34, 1.36 or 1.39)",
    '1.2 to 1.45',
  ),
};
/** A haemoglobin per litre gives a content per litre. */
const perLitre = ({ hb }: { readonly hb: string }) => (/\/L$/.test(hb) ? 'mL/L' : 'mL/dL');
const contentFormula = 'hb * hufner * sat + solubility * po2';
const contentSource = 'textbook; 0.0225 mL/dL/kPa and 0.003 mL/dL/mm[Hg] are usual solubilities';

/** Oxygen content, delivery and uptake. */
export const oxygenQuantities = [
  define({
    key: 'oxygen_content_kpa',
    name: 'oxygenContent',
    title: 'Oxygen content of blood, pressure in kilopascal',
    inputs: {
      ...contentInputs,
      po2: single('kPa', 'oxygenPressure', 'oxygen pressure', 'at least 0'),
      solubility: defaulted(
        single('mL/dL/kPa', 'solubility', 'solubility of oxygen', '0.01 to 0.05 mL/dL/kPa'),
        0.0225,
      ),
    },
    unit: 'mL/dL',
    shownIn: perLitre,
    formula: contentFormula,
    source: contentSource,
    compute: (g) => oxygenContent(g.hb, g.sat, g.po2, g.hufner, g.solubility),
  }),
  define({
    key: 'oxygen_content_mmhg',
    name: 'oxygenContentFromMillimetresOfMercury',
    title: 'Oxygen content of blood, pressure in millimetres of mercury',
    inputs: {
      ...contentInputs,
      po2: single('mm[Hg]', 'oxygenPressure', 'oxygen pressure', 'at least 0'),
      solubility: defaulted(
        single('mL/dL/mm[Hg]', 'solubility', 'solubility of oxygen', '0.0013 to 0.0067 mL/dL/mm[Hg]'),
        0.003,
      ),
    },
    unit: 'mL/dL',
    shownIn: perLitre,
    formula: contentFormula,
    source: contentSource,
    compute: (g) =>
      oxygenContent(
        g.hb,
        g.sat,
        convert(g.po2, 'mm[Hg]', 'kPa'),
        g.hufner,
        convert(g.solubility, 'mL/dL/mm[Hg]', 'mL/dL/kPa'),
      ),
  }),
  define({
    key: 'oxygen_delivery',
    name: 'oxygenDelivery',
    title: 'Oxygen delivery',
    inputs: { co: cardiacOutputInput, content: content('arterialContent', 'arterial oxygen content') },
    unit: 'mL/min',
    formula: '10 * co * content',
    source: 'textbook',
    compute: (g) => oxygenDelivery(g.co, g.content),
  }),
  define({
    key: 'oxygen_uptake',
    name: 'oxygenUptake',
    title: 'Oxygen uptake, Fick principle',
    inputs: {
      co: cardiacOutputInput,
      content_a: content('arterialContent', 'arterial oxygen content'),
      content_v: content('venousContent', 'mixed venous oxygen content'),
    },
    unit: 'mL/min',
    formula: '10 * co * (content_a - content_v)',
    source: 'Fick principle',
    compute: (g) => oxygenUptake(g.co, g.content_a, g.content_v),
  }),
  define({
    key: 'oxygen_extraction_ratio',
    name: 'oxygenExtractionRatio',
    title: 'Oxygen extraction ratio',
    inputs: {
      content_a: content('arterialContent', 'arterial oxygen content'),
      content_v: content('venousContent', 'venous oxygen content'),
    },
    unit: '1',
    formula: '(content_a - content_v) / content_a',
    source: 'textbook',
    compute: (g) => oxygenExtractionRatio(g.content_a, g.content_v),
  }),
  define({
    key: 'limb_oxygen_delivery',
    name: 'limbOxygenDelivery',
    title: 'Oxygen delivery to a limb per volume of tissue',
    inputs: { fbf: forearmBloodFlow, content: content('arterialContent', 'arterial oxygen content') },
    unit: 'mL/min/dL',
    formula: 'fbf * content / 100',
    source: 'definition',
    compute: (g) => limbOxygenDelivery(g.fbf, g.content),
  }),
  define({
    key: 'cardiac_output',
    name: 'cardiacOutput',
    title: 'Cardiac output',
    inputs: { hr: heartRate, sv: single('mL', 'strokeVolume', 'stroke volume', 'above 0') },
    unit: 'L/min',
    formula: 'hr * sv / 1000',
    source: 'definition',
    compute: (g) => cardiacOutput(g.hr, g.sv),
  }),
];
