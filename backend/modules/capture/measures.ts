import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import type { EntryValues } from '#schemas/instruments/entry-values.ts';
import { fieldNumber } from '#schemas/instruments/scope.ts';
import {
  measuredQuantities,
  type Measure,
  type MeasuredQuantity,
  type VisitType,
} from '#schemas/protocol/protocol.ts';

/** The values of one step's entry, with the instrument that says how they are read. */
export interface StepValues {
  compiled: CompiledInstrument;
  values: EntryValues;
}

/** One number that the analysis takes from a visit, or why it has none. */
export interface VisitMeasure {
  key: string;
  timePoint: string;
  quantity: MeasuredQuantity;
  unit: string;
  value: number | null;
  /** What is not there yet, in words. */
  waitingFor: string | null;
  /** Set by the protocol, or because a field it comes from is. */
  unblinding: boolean;
}

/**
 * Computes the measures of a visit from its entries, the same way for the live column and for cuts.
 * A mean of several needs all of them: pressures that bracket a block are no bracket when one is missing.
 */
export function visitMeasures(type: VisitType, steps: ReadonlyMap<string, StepValues>): VisitMeasure[] {
  return type.measures.map((measure) => ({
    key: measure.key,
    timePoint: measure.timePoint,
    quantity: measure.quantity,
    unit: measuredQuantities[measure.quantity],
    ...valueOf(measure, type, steps),
    unblinding: isUnblinding(measure, steps),
  }));
}

function valueOf(
  measure: Measure,
  { runSheet }: VisitType,
  steps: ReadonlyMap<string, StepValues>,
): Pick<VisitMeasure, 'value' | 'waitingFor'> {
  const numbers: number[] = [];
  for (const { step, pointer } of measure.from) {
    const taken = steps.get(step);
    const field = taken?.compiled.field(pointer);
    const value = taken && field && fieldNumber(taken.compiled, field, taken.values);
    if (value === undefined) {
      const label = runSheet.find(({ key }) => key === step)?.label;
      return { value: null, waitingFor: field?.label ?? label ?? step };
    }
    numbers.push(value);
  }
  return { value: numbers.reduce((sum, value) => sum + value, 0) / numbers.length, waitingFor: null };
}

const isUnblinding = (measure: Measure, steps: ReadonlyMap<string, StepValues>): boolean =>
  measure.unblinding === true ||
  measure.from.some(({ step, pointer }) => steps.get(step)?.compiled.field(pointer)?.level === 'unblinding');
