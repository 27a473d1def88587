/** UCUM atoms of the field: how each is written on screen and said aloud (one, many). UCUM case-sensitive codes. */
interface UnitName {
  symbol: string;
  one: string;
  many?: string;
}

export const atoms: Record<string, UnitName> = {
  m: { symbol: 'm', one: 'metre' },
  s: { symbol: 's', one: 'second' },
  min: { symbol: 'min', one: 'minute' },
  h: { symbol: 'h', one: 'hour' },
  d: { symbol: 'd', one: 'day' },
  wk: { symbol: 'wk', one: 'week' },
  mo: { symbol: 'months', one: 'month' },
  a: { symbol: 'years', one: 'year' },
  g: { symbol: 'g', one: 'gram' },
  l: { symbol: 'L', one: 'litre' },
  L: { symbol: 'L', one: 'litre' },
  mol: { symbol: 'mol', one: 'mole' },
  eq: { symbol: 'Eq', one: 'equivalent' },
  osm: { symbol: 'Osm', one: 'osmole' },
  Pa: { symbol: 'Pa', one: 'pascal' },
  P: { symbol: 'P', one: 'poise', many: 'poise' },
  N: { symbol: 'N', one: 'newton' },
  J: { symbol: 'J', one: 'joule' },
  W: { symbol: 'W', one: 'watt' },
  V: { symbol: 'V', one: 'volt' },
  Hz: { symbol: 'Hz', one: 'hertz', many: 'hertz' },
  dyn: { symbol: 'dyn', one: 'dyne' },
  K: { symbol: 'K', one: 'kelvin' },
  Cel: { symbol: '°C', one: 'degree Celsius', many: 'degrees Celsius' },
  deg: { symbol: '°', one: 'degree' },
  rad: { symbol: 'rad', one: 'radian' },
  bar: { symbol: 'bar', one: 'bar' },
  '%': { symbol: '%', one: 'per cent', many: 'per cent' },
  'm[Hg]': { symbol: 'mHg', one: 'metre of mercury', many: 'metres of mercury' },
  'm[H2O]': { symbol: 'mH₂O', one: 'metre of water', many: 'metres of water' },
  '[PRU]': { symbol: 'PRU', one: 'peripheral resistance unit' },
  '[g]': { symbol: 'g', one: 'standard gravity', many: 'times gravity' },
  '[iU]': { symbol: 'IU', one: 'international unit' },
  '[pH]': { symbol: 'pH', one: 'pH', many: 'pH' },
  '10*': { symbol: '10', one: 'ten', many: 'ten' },
  '10^': { symbol: '10', one: 'ten', many: 'ten' },
};

export const prefixes: Record<string, { symbol: string; spoken: string }> = {
  G: { symbol: 'G', spoken: 'giga' },
  M: { symbol: 'M', spoken: 'mega' },
  k: { symbol: 'k', spoken: 'kilo' },
  d: { symbol: 'd', spoken: 'deci' },
  c: { symbol: 'c', spoken: 'centi' },
  m: { symbol: 'm', spoken: 'milli' },
  u: { symbol: 'µ', spoken: 'micro' },
  n: { symbol: 'n', spoken: 'nano' },
  p: { symbol: 'p', spoken: 'pico' },
  f: { symbol: 'f', spoken: 'femto' },
};

/** Units that the trade writes in its own way, though their UCUM code could be spelled out. */
export const customary: Record<string, { readable: string; spoken: string }> = {
  '1': { readable: '', spoken: '' },
  'mL/min/dL': {
    readable: 'mL/min per 100 mL',
    spoken: 'millilitres per minute per 100 millilitres',
  },
  'mL/(100.mL)/min': {
    readable: 'mL/min per 100 mL',
    spoken: 'millilitres per minute per 100 millilitres',
  },
  'mm[Hg].min.dL/mL': {
    readable: 'mmHg per mL/min/100 mL',
    spoken: 'millimetres of mercury per millilitre per minute per 100 millilitres',
  },
  'mL/min/dL/mm[Hg]': {
    readable: 'mL/min/100 mL per mmHg',
    spoken: 'millilitres per minute per 100 millilitres per millimetre of mercury',
  },
  'mm[Hg].min/mL': {
    readable: 'mmHg per mL/min',
    spoken: 'millimetres of mercury per millilitre per minute',
  },
  'mm[Hg].min/L': { readable: 'mmHg per L/min', spoken: 'millimetres of mercury per litre per minute' },
};
