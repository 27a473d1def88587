/**
 * Units that the field uses, as UCUM codes (case sensitive), with the form a person reads.
 *
 * The list serves display and the editor's suggestions; an instrument may use any valid UCUM code.
 * `shown` is what stands beside a number; `factor` turns a stored value into the shown one where they differ:
 * haematocrit is stored as a fraction and read as a percentage.
 * Source: UCUM 2.2 (2024-06-17).
 */
export const units = [
  { code: 'mm[Hg]', shown: 'mmHg', name: 'pressure' },
  { code: 'kPa', shown: 'kPa', name: 'pressure' },
  { code: 'cm[H2O]', shown: 'cmH2O', name: 'pressure of a water column' },
  { code: 'mL/min/dL', shown: 'mL/min/dL', name: 'flow per volume of tissue' },
  { code: 'mL/min', shown: 'mL/min', name: 'flow' },
  { code: 'L/min', shown: 'L/min', name: 'flow' },
  { code: 'mm[Hg].min.dL/mL', shown: 'mmHg·min·dL/mL', name: 'forearm vascular resistance' },
  { code: 'mm[Hg].min/mL', shown: 'mmHg·min/mL', name: 'limb vascular resistance' },
  { code: 'mm[Hg].min/L', shown: 'mmHg·min/L', name: 'systemic vascular resistance (Wood units)' },
  { code: 'mL/min/dL/mm[Hg]', shown: 'mL/min/dL/mmHg', name: 'forearm vascular conductance' },
  { code: 'mL/min/mm[Hg]', shown: 'mL/min/mmHg', name: 'limb vascular conductance' },
  { code: 'mPa.s', shown: 'mPa·s', name: 'viscosity' },
  { code: 'Pa', shown: 'Pa', name: 'stress' },
  { code: '/s', shown: '1/s', name: 'shear rate' },
  { code: 'L/L', shown: '%', factor: 100, name: 'haematocrit' },
  { code: 'g/dL', shown: 'g/dL', name: 'mass concentration' },
  { code: 'g/L', shown: 'g/L', name: 'mass concentration' },
  { code: '%', shown: '%', name: 'percentage' },
  { code: '1', shown: '', name: 'ratio' },
  { code: '/min', shown: '/min', name: 'rate' },
  { code: 'kg', shown: 'kg', name: 'mass' },
  { code: 'kg/m2', shown: 'kg/m²', name: 'body mass index' },
  { code: 'm', shown: 'm', name: 'length' },
  { code: 'cm', shown: 'cm', name: 'length' },
  { code: 'mm', shown: 'mm', name: 'length' },
  { code: 'mL', shown: 'mL', name: 'volume' },
  { code: 'L', shown: 'L', name: 'volume' },
  { code: 'cm/s', shown: 'cm/s', name: 'velocity' },
  { code: 'deg', shown: '°', name: 'angle' },
  { code: 'Cel', shown: '°C', name: 'temperature' },
  { code: 's', shown: 's', name: 'time' },
  { code: 'min', shown: 'min', name: 'time' },
  { code: 'h', shown: 'h', name: 'time' },
  { code: 'd', shown: 'd', name: 'time' },
  { code: 'a', shown: 'years', name: 'age' },
  { code: 'N', shown: 'N', name: 'force' },
  { code: '[g]', shown: 'g', name: 'acceleration, multiples of gravity' },
] as const satisfies readonly { code: string; shown: string; factor?: number; name: string }[];

/** What a person reads beside a stored number: the unit's printed form and the factor to show the value in it. */
export function shownUnit(code: string): { shown: string; factor: number } {
  const unit: { code: string; shown: string; factor?: number } | undefined = units.find(
    (known) => known.code === code,
  );
  return unit ? { shown: unit.shown, factor: unit.factor ?? 1 } : { shown: code, factor: 1 };
}

/** Whether two codes write the same unit, so that a value needs no conversion: a fraction is a plain ratio. */
export function sameUnit(a: string | undefined, b: string | undefined): boolean {
  const plain = (code: string | undefined) => (code === 'L/L' ? '1' : code);
  return plain(a) === plain(b);
}
