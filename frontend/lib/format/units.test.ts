import { describe, expect, it } from 'vitest';
import { readableUnit, spokenUnit, withUnit } from './units.ts';

/** Codes: UCUM 2.2. Readable and spoken forms: common practice, no source. */
describe.each([
  ['mm[Hg]', 'mmHg', 'millimetres of mercury'],
  ['mL/min/dL', 'mL/min per 100 mL', 'millilitres per minute per 100 millilitres'],
  [
    'mm[Hg].min.dL/mL',
    'mmHg per mL/min/100 mL',
    'millimetres of mercury per millilitre per minute per 100 millilitres',
  ],
  ['mPa.s', 'mPa·s', 'millipascal seconds'],
  ['L/L', 'L/L', 'litres per litre'],
  ['%', '%', 'per cent'],
  ['/min', '/min', 'per minute'],
  ['{beats}/min', 'beats/min', 'beats per minute'],
  ['Cel', '°C', 'degrees Celsius'],
  ['kg/m2', 'kg/m²', 'kilograms per square metre'],
  ['dyn.s/cm5', 'dyn·s/cm⁵', 'dyne seconds per centimetre to the fifth power'],
  ['ug/min', 'µg/min', 'micrograms per minute'],
  ['10*9/L', '10⁹/L', 'ten to the power of 9 per litre'],
  ['cm[H2O]', 'cmH₂O', 'centimetres of water'],
  ['min', 'min', 'minutes'],
  ['a', 'years', 'years'],
  ['1', '', ''],
])('%s', (ucum, readable, spoken) => {
  it(`reads "${readable}"`, () => expect(readableUnit(ucum)).toBe(readable));
  it(`is said "${spoken}"`, () => expect(spokenUnit(ucum)).toBe(spoken));
});

describe('an unknown unit', () => {
  it('stays as it is written', () => {
    expect(readableUnit('[xyz]/min')).toBe('[xyz]/min');
    expect(spokenUnit('[xyz]/min')).toBe('[xyz] per minute');
  });
});

describe('withUnit', () => {
  it('keeps the digits and does not let the unit go to the next line', () => {
    expect(withUnit('118.50', 'mm[Hg]')).toBe('118.50\u00a0mmHg');
    expect(withUnit('0.98', '1')).toBe('0.98');
  });
});
