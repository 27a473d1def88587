export type Severity = 'caution' | 'info';

/** Every caution that may follow a value into tables, figures and exports. The list is closed. */
export const cautionCodes = {
  SHEAR_RANGE: ['caution', 'The shear rate lies outside the range in which this viscosity holds.'],
  SMALL_VESSEL: ['caution', 'Below 300 um bulk viscosity is too high; use a law that takes the diameter.'],
  DIAMETER_RANGE: ['caution', 'The diameter lies outside the range for which the law was fitted.'],
  WOMERSLEY: ['caution', 'Pulsatile inertia matters: the velocity profile is not quasi-steady.'],
  REYNOLDS_HIGH: ['caution', 'The Reynolds number is above 2000: flow may be turbulent.'],
  ENTRANCE: ['caution', 'The vessel is shorter than the length that laminar flow needs to develop.'],
  CRITICAL_CLOSING: [
    'caution',
    'Vessels may close or fall like a waterfall: resistance then depends on pressure.',
  ],
  HAEMATOCRIT_RANGE: ['caution', 'The haematocrit lies outside the range for which the law was published.'],
  TRAPPED_PLASMA: ['caution', 'At this haematocrit cells pack slowly and trap plasma: spin again.'],
  RIGID_SPHERES: [
    'caution',
    'The law is for rigid spheres and over-predicts blood above a haematocrit of 0.3.',
  ],
  DESIMONE_VARIANT: ['caution', 'Estimated; the grouping of the constant in this law is inferred.'],
  HAEMATOCRIT_ABSENT: ['caution', 'The law knows no haematocrit and is not allowed in the split.'],
  TEMPERATURE_RANGE: ['caution', 'The temperature lies outside the range in which this scaling holds.'],
  TEMPERATURE_ASSUMED: [
    'caution',
    'The plasma viscosity came without a temperature and is taken as one at 37 Cel.',
  ],
  PLASMA_VISCOSITY_ASSUMED: ['caution', 'No plasma viscosity was given; 1.2 mPa.s at 37 Cel is assumed.'],
  PROTEIN_ASSUMED: ['caution', 'No protein was given; a usual value is assumed.'],
  HEART_RATE_RANGE: ['caution', 'The heart rate lies outside the range for which the rule is meant.'],
  AORTIC_FORMULA: ['caution', 'The formula comes from aortic pressures; a cuff pressure extrapolates it.'],
  PREPRINT_FORMULA: ['caution', 'The formula comes from a preprint.'],
  FORM_FACTOR_RANGE: [
    'caution',
    'The form factor lies outside 0.2 to 0.6: one of the pressures may be wrong.',
  ],
  WAVEFORM_SAMPLING: ['caution', 'The waveform is sampled below 100 Hz.'],
  WAVEFORM_SHORT: ['caution', 'The waveform holds fewer than five whole beats.'],
  FEW_READINGS: ['caution', 'The mean stands on fewer than three readings.'],
  BLOCK_VARIATION: ['caution', 'The readings of this block vary by more than 15 %.'],
  CALIBRATION_DRIFT: ['caution', 'The calibrations before and after differ by more than 5 %.'],
  HYPERAEMIA_CONFIRMED: ['info', 'A flow above 100 mL/min/dL was confirmed as hyperaemia.'],
  FLOW_UNCONFIRMED: ['caution', 'A flow above 100 mL/min/dL counts only when a person confirms hyperaemia.'],
  VENOUS_PRESSURE_NEGLECTED: ['info', 'Venous pressure is neglected by convention.'],
  NOT_SIMULTANEOUS: ['caution', 'Pressure and flow were taken more than 5 minutes apart.'],
  NEGATIVE_GRADIENT: [
    'caution',
    'The gradient is not above 0: a measurement error, and no resistance can be computed.',
  ],
  ASSUMED_FLOW_FRACTION: ['caution', 'The fraction of cardiac output is an assumption, not a measurement.'],
  EQUIVALENT_RADIUS: [
    'info',
    'An equivalent radius: length, number and branching of vessels are taken as constant.',
  ],
  ORDER_DEPENDENT: ['caution', 'The part depends on the order of steps; the log-changes do not.'],
  SHARE_WITHOUT_INTERVAL: [
    'caution',
    'No standard errors were given: whether the share means anything is not known.',
  ],
  DELTA_INTERVAL: ['caution', "A delta-method deviation is a quick look; show Fieller's interval."],
  MATHEMATICAL_COUPLING: ['caution', 'The two quantities share a term: they correlate by construction.'],
  VELOCITY_KIND: [
    'info',
    'Right for the centre-line velocity; with a mean velocity it is half the wall value.',
  ],
  STUDY_EXPONENT: ['info', 'The allometric exponent has to come from this very study.'],
  SMALL_DIAMETER_CHANGE: ['caution', 'The peak diameter lies more than 0.1 mm below baseline.'],
  LATE_FIRST_FLOW: ['caution', 'The first flow after release came later than 10 s: the peak may be missed.'],
  INCOMPLETE_RECOVERY: [
    'caution',
    'Flow had not come back within 10 % of baseline; nothing was extrapolated.',
  ],
  NOT_A_TARGET: ['caution', 'Exploratory: no haematocrit is recommended by it.'],
  DUPLICATES_DIFFER: ['caution', 'The two tubes differ by more than 0.5 point: read a third.'],
  MCHC_IMPLAUSIBLE: ['caution', 'Haemoglobin and haematocrit do not fit: one of the two is wrong.'],
  ENTRY_CHECK_ONLY: ['info', 'A check of data entry, not a measurement.'],
  CORRECTED_HAEMATOCRIT: ['info', 'Corrected for trapped plasma: do not mix with uncorrected values.'],
  RED_CELL_MASS_CONSTANT: ['info', 'Assumes that no red cells came or went between the samples.'],
  LAW_DEPENDENT: ['info', 'The rheological part depends on the viscosity law; show it over several.'],
  SLOPE_FIT: ['caution', 'The line fits the volume poorly (R² below 0.90).'],
  BASELINE_DRIFT: ['caution', 'The volume drifted before the cuff was inflated.'],
  FIXED_WINDOW: ['caution', 'The slope was fitted in a fixed window, not over whole heart beats.'],
  CLIPPED_SIGNAL: ['caution', 'The signal is cut off at its limits.'],
  SIGNAL_GAP: ['caution', 'Samples are missing; the beats beside the gap were left out.'],
} as const satisfies Record<string, readonly [Severity, string]>;

export type CautionCode = keyof typeof cautionCodes;

export interface Caution {
  readonly code: CautionCode;
  readonly severity: Severity;
  readonly message: string;
}

/** The caution behind a code, with the sentence a person reads. */
function caution(code: CautionCode): Caution {
  const [severity, message] = cautionCodes[code];
  return { code, severity, message };
}

/** Keeps the codes whose condition held, each once: `[rate < 50 && 'SHEAR_RANGE']`. */
export function cautions(codes: readonly (CautionCode | false | undefined)[]): Caution[] {
  return [...new Set(codes)].filter((code) => code !== false && code !== undefined).map(caution);
}
