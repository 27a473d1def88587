import type { CompiledInstrument } from '../instruments/compiled-instrument.ts';
import type { Level } from '../vocabulary/states.ts';
import type { LiveInput, Measure, Protocol } from './protocol.ts';
import { referencedField, type Place } from './referenced-field.ts';

/** What a measure reveals: what its author said, and what the fields reveal from which it comes (RB-07). */
export function measureLevel(measure: Measure, place: Place): Level {
  const hidden = measure.from.some((reference) => {
    const found = referencedField(reference, place);
    return 'field' in found && found.field.level === 'unblinding';
  });
  return hidden || measure.unblinding === true ? 'unblinding' : 'open';
}

/**
 * The protocol with `unblinding` spread from fields to measures and from measures to live quantities.
 * A published protocol is stored in this form, so that whoever reads it need not follow the graph again.
 */
export function withUnblindingSpread(
  protocol: Protocol,
  instruments: ReadonlyMap<string, CompiledInstrument>,
): Protocol {
  const visitTypes = protocol.visitTypes.map((visitType) => ({
    ...visitType,
    measures: visitType.measures.map((measure) => ({
      ...measure,
      unblinding: measureLevel(measure, { visitType, protocol, instruments }) === 'unblinding',
    })),
  }));
  const hidden = new Set(
    visitTypes.flatMap(({ measures }) =>
      measures.filter(({ unblinding }) => unblinding).map(({ quantity }) => quantity),
    ),
  );
  const hiddenLive = new Set<string>();
  const reveals = (input: LiveInput) =>
    typeof input === 'string' ? hidden.has(input) : 'live' in input && hiddenLive.has(input.live);
  const liveQuantities = protocol.liveQuantities.map((live) => {
    const unblinding = live.unblinding || Object.values(live.inputs).some(reveals);
    if (unblinding) hiddenLive.add(live.key);
    return { ...live, unblinding };
  });
  return { ...protocol, visitTypes, liveQuantities };
}
