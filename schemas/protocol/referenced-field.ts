import type { CompiledField, CompiledInstrument } from '../instruments/compiled-instrument.ts';
import type { Protocol, ValueReference, VisitType } from './protocol.ts';
import { withBlocksWrittenOut } from './run-sheet.ts';

/** From where a reference is read: its visit type, the protocol, the published instruments by key. */
export interface Place {
  visitType: VisitType;
  protocol: Protocol;
  instruments: ReadonlyMap<string, CompiledInstrument>;
}

/** The field that a reference names, or which part of it leads nowhere. */
export function referencedField(
  { visitType, step: stepKey, pointer }: ValueReference,
  place: Place,
): { field: CompiledField } | { message: string; at: keyof ValueReference } {
  const visit =
    visitType === undefined
      ? place.visitType
      : place.protocol.visitTypes.find(({ key }) => key === visitType);
  if (!visit) return { at: 'visitType', message: `There is no visit type ${visitType ?? ''}` };
  const step = withBlocksWrittenOut(visit).runSheet.find(({ key }) => key === stepKey);
  if (!step) return { at: 'step', message: `${visit.label} has no step ${stepKey}` };
  if (step.instrument === undefined) return { at: 'step', message: `${step.label} fills in no instrument` };
  const instrument = place.instruments.get(step.instrument);
  if (!instrument) return { at: 'step', message: `There is no published instrument ${step.instrument}` };
  const field = instrument.field(pointer);
  if (!field) return { at: 'pointer', message: `${instrument.title} has no field ${pointer}` };
  return { field };
}
