/** How the conditions are laid over the participants. */
export const designs = ['crossover-2x2', 'parallel', 'single-group'] as const;
export type Design = (typeof designs)[number];

/** A study's protocol: conditions, sequences, sites, visits with their run sheets, and what is measured in them. */
export interface Protocol {
  title: string;
  design: Design;
  plannedParticipants: number;
  conditions: { key: string; label: string }[];
  /** One condition for each period, in order. */
  sequences: { key: string; label: string; conditions: string[] }[];
  /** Least days between the periods of a crossover. */
  washoutDays?: number;
  /** Keys of the study's sites. */
  sites: string[];
  allocation: { blockSizes: number[]; stratifyBySite: boolean };
  visitTypes: VisitType[];
  liveQuantities: LiveQuantity[];
  /** Instruments that a participant's own log holds: adverse events, medication. */
  participantLogs: { instrument: string; label: string }[];
  missedVisitReasons: string[];
  /** Stopping rules in words: shown where they matter, never computed. */
  safetyLimits: { key: string; label: string; text: string }[];
}

export interface VisitType {
  key: string;
  label: string;
  /** Study day; day 1 is the day of reference, there is no day 0. */
  targetDay: number;
  /** Days that the visit may be early or late. */
  windowBefore: number;
  windowAfter: number;
  /** The period whose condition is given here. */
  period?: number;
  runSheet: RunSheetStep[];
  /** Steps that come again (over dose or arm) without being written out; see `run-sheet.ts`. */
  blocks?: RunSheetBlock[];
  measures: Measure[];
}

export interface RunSheetStep {
  key: string;
  label: string;
  anchor: StepAnchor;
  /** Minutes after the anchor. */
  plannedMinute: number;
  durationMinutes: number;
  /** Key of the instrument that is filled in here. */
  instrument?: string;
  performedBy: StepPerformer;
  instructions?: string;
  holdPoint?: HoldPoint;
  /** What one press stamps: "exchange ended". Other steps may be anchored to it. */
  event?: string;
  /** Longest time from this step's event (or start) to its end, as for a wrist cuff. */
  maximumMinutes?: number;
  /** Code of `vocabulary/caution-texts.ts`. */
  caution?: string;
}

export const stepPerformers = ['coordinator', 'unblinded-technician'] as const;
export type StepPerformer = (typeof stepPerformers)[number];

/** From when the planned minutes of a step count. */
export type StepAnchor = { kind: 'visit-start' } | { kind: 'event'; step: string };

/** A step opens when this holds; passing it earlier takes a reason and is a deviation. */
export type HoldPoint =
  | { kind: 'minutes-since'; label: string; minutes: number; step: string }
  | { kind: 'expression'; label: string; expression: string; inputs: Record<string, ValueReference> };

/** A field of the entry made at a step: of this visit, or of the visit type that is named. */
export interface ValueReference {
  visitType?: string;
  step: string;
  pointer: string;
}

export interface RunSheetBlock {
  key: string;
  label: string;
  /** Keys of the steps that come again. */
  steps: string[];
  repeats: { key: string; label: string }[];
  minutesApart: number;
}

/** One number that the analysis takes from a visit. */
export interface Measure {
  key: string;
  /** `baseline`, `after`, or a time of the protocol's own. */
  timePoint: string;
  quantity: MeasuredQuantity;
  from: ValueReference[];
  /** `mean` of several (pressures that bracket a flow block), or the `only` one. */
  combine: 'mean' | 'only';
  /** Set by its author, or because a field that it comes from is. */
  unblinding?: boolean;
}

/** What a visit can measure, with the unit in which the analysis takes it. */
export const measuredQuantities = {
  meanArterialPressure: 'mm[Hg]',
  systolicPressure: 'mm[Hg]',
  diastolicPressure: 'mm[Hg]',
  heartRate: '/min',
  forearmBloodFlow: 'mL/min/dL',
  controlForearmBloodFlow: 'mL/min/dL',
  brachialBloodFlow: 'mL/min',
  haematocrit: 'L/L',
  haemoglobin: 'g/dL',
  plasmaViscosity: 'mPa.s',
  bloodViscosity: 'mPa.s',
  totalProtein: 'g/L',
  brachialDiameter: 'mm',
  skinTemperature: 'Cel',
} as const;
export type MeasuredQuantity = keyof typeof measuredQuantities;

/** A quantity computed while the readings go in, at each time point that has its inputs. */
export interface LiveQuantity {
  key: string;
  label: string;
  /** A name of the analysis library. */
  quantity: string;
  /** The library's input name → what is measured, a constant with its unit, or a live quantity listed before. */
  inputs: Record<string, LiveInput>;
  /** Hidden from blinded members until unblinding: a fall of a quarter tells the arm. */
  unblinding: boolean;
}

export type LiveInput = MeasuredQuantity | { value: number; unit: string } | { live: string };

/** A place in a protocol that needs attention, and what to do about it. */
export interface ProtocolProblem {
  pointer: string;
  message: string;
}
