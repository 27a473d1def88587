import type { CompiledInstrument } from '../instruments/compiled-instrument.ts';
import type { QuantityLibrary } from '../instruments/quantity-library.ts';
import { sameUnit } from '../vocabulary/units.ts';
import { designProblems } from './check-design.ts';
import { stepProblems } from './check-run-sheet.ts';
import { measureLevel } from './protocol-levels.ts';
import {
  measuredQuantities,
  type LiveInput,
  type LiveQuantity,
  type Measure,
  type Protocol,
  type ProtocolProblem,
} from './protocol.ts';
import { referencedField, type Place } from './referenced-field.ts';
import { withBlocksWrittenOut } from './run-sheet.ts';

/**
 * Checks what the parts of a protocol ask of one another: sequences that fit the design, steps and fields that exist,
 * anchors without circles, units that the analysis takes. The document must have passed `protocolSchema`.
 *
 * @param instruments the published instruments, by key
 */
export function checkProtocol(
  protocol: Protocol,
  instruments: ReadonlyMap<string, CompiledInstrument>,
  library: QuantityLibrary,
): ProtocolProblem[] {
  return [
    ...designProblems(protocol),
    ...protocol.visitTypes.flatMap((visitType, index) => {
      const pointer = `/visitTypes/${index}`;
      const place: Place = { visitType, protocol, instruments };
      const { runSheet } = withBlocksWrittenOut(visitType);
      return [
        ...visitType.runSheet.flatMap((step, at) =>
          // A step of a block is judged as it is written out: its anchors may lie in the block.
          stepProblems(written(step.key, runSheet) ?? step, runSheet, place, `${pointer}/runSheet/${at}`),
        ),
        ...visitType.measures.flatMap((measure, at) =>
          measureProblems(measure, place, `${pointer}/measures/${at}`),
        ),
      ];
    }),
    ...protocol.participantLogs.flatMap(({ instrument }, index) =>
      instruments.has(instrument)
        ? []
        : [
            {
              pointer: `/participantLogs/${index}/instrument`,
              message: `There is no published instrument ${instrument}`,
            },
          ],
    ),
    ...protocol.liveQuantities.flatMap((live, index) =>
      liveProblems(live, protocol, library, `/liveQuantities/${index}`),
    ),
  ];
}

function written<Step extends { key: string }>(key: string, runSheet: Step[]): Step | undefined {
  return runSheet.find((step) => step.key === key) ?? runSheet.find((step) => step.key.startsWith(`${key}-`));
}

function measureProblems(measure: Measure, place: Place, pointer: string): ProtocolProblem[] {
  const unit = measuredQuantities[measure.quantity];
  const problems: ProtocolProblem[] = [];
  for (const [index, reference] of measure.from.entries()) {
    const found = referencedField(reference, place);
    if ('message' in found) {
      problems.push({ pointer: `${pointer}/from/${index}/${found.at}`, message: found.message });
    } else if (!sameUnit(found.field.unit, unit)) {
      const message = `${measure.quantity} is taken in ${unit}; ${found.field.label} is in ${found.field.unit ?? 'no unit'}`;
      problems.push({ pointer: `${pointer}/from/${index}/pointer`, message });
    }
  }
  if (measure.combine === 'only' && measure.from.length !== 1) {
    problems.push({
      pointer: `${pointer}/combine`,
      message: 'There are several values: combine them as "mean"',
    });
  }
  if (measure.unblinding === false && measureLevel(measure, place) === 'unblinding') {
    const message = 'It comes from a field that unblinds, so it unblinds as well';
    problems.push({ pointer: `${pointer}/unblinding`, message });
  }
  return problems;
}

function liveProblems(
  live: LiveQuantity,
  protocol: Protocol,
  library: QuantityLibrary,
  pointer: string,
): ProtocolProblem[] {
  const definition = library.get(live.quantity);
  if (!definition)
    return [{ pointer: `${pointer}/quantity`, message: `The library has no quantity ${live.quantity}` }];
  const problems: ProtocolProblem[] = [];
  for (const [name, input] of Object.entries(live.inputs)) {
    const place = `${pointer}/inputs/${name}`;
    const needed = definition.inputs.find((known) => known.name === name);
    const given = unitOfInput(input, live, protocol, library);
    if (!needed) {
      const known = definition.inputs.map((one) => one.name).join(', ');
      problems.push({ pointer: place, message: `${live.quantity} has no input ${name}; it has ${known}` });
    } else if ('message' in given) {
      problems.push({ pointer: place, message: given.message });
    } else if (!sameUnit(given.unit, needed.unit) && !(needed.accepts?.(given.unit) ?? false)) {
      problems.push({
        pointer: place,
        message: `${name} is taken in ${needed.unit}, this is in ${given.unit}`,
      });
    }
  }
  for (const { name, optional } of definition.inputs) {
    if (!optional && live.inputs[name] === undefined) {
      problems.push({ pointer: `${pointer}/inputs`, message: `The input ${name} is missing` });
    }
  }
  return problems;
}

function unitOfInput(
  input: LiveInput,
  live: LiveQuantity,
  { visitTypes, liveQuantities }: Protocol,
  library: QuantityLibrary,
): { unit: string } | { message: string } {
  if (typeof input === 'string') {
    const measured = visitTypes.some(({ measures }) => measures.some(({ quantity }) => quantity === input));
    return measured ? { unit: measuredQuantities[input] } : { message: `No visit measures ${input}` };
  }
  if ('unit' in input) return input;
  const before = liveQuantities.slice(0, liveQuantities.indexOf(live)).find(({ key }) => key === input.live);
  const unit = before && library.get(before.quantity)?.unit;
  return unit === undefined
    ? { message: `No live quantity ${input.live} is listed before this one` }
    : { unit };
}
