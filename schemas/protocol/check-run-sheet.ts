import { expressionCompiler } from '../expressions/expression.ts';
import type { ExpressionVariables } from '../expressions/expression-types.ts';
import type { CompiledField, CompiledInstrument } from '../instruments/compiled-instrument.ts';
import type { Level } from '../vocabulary/states.ts';
import { referencedField, type Place } from './referenced-field.ts';
import type { ProtocolProblem, RunSheetStep } from './protocol.ts';

/** What one step of a run sheet needs: its instrument, its anchor, its hold point. */
export function stepProblems(
  step: RunSheetStep,
  steps: RunSheetStep[],
  place: Place,
  pointer: string,
): ProtocolProblem[] {
  return [
    ...instrumentProblems(step, place, pointer),
    ...anchorProblems(step, steps, pointer),
    ...holdPointProblems(step, steps, place, pointer),
  ];
}

/** A hold point over an unblinding value answers open or shut only, and is asked by the unblinded technician. */
function holdPointLevel(step: RunSheetStep, place: Place): Level {
  if (step.holdPoint?.kind !== 'expression') return 'open';
  const fields = Object.values(step.holdPoint.inputs).map((reference) => referencedField(reference, place));
  return fields.some((found) => 'field' in found && found.field.level === 'unblinding')
    ? 'unblinding'
    : 'open';
}

function instrumentProblems(step: RunSheetStep, { instruments }: Place, pointer: string): ProtocolProblem[] {
  if (step.instrument === undefined) return [];
  const instrument = instruments.get(step.instrument);
  if (!instrument)
    return [
      { pointer: `${pointer}/instrument`, message: `There is no published instrument ${step.instrument}` },
    ];
  const hidden = hiddenRequired(instrument);
  if (step.performedBy === 'unblinded-technician' || hidden.length === 0) return [];
  const message = `${hidden.map(({ label }) => label).join(', ')} would unblind: this step belongs to the unblinded technician`;
  return [{ pointer: `${pointer}/performedBy`, message }];
}

function hiddenRequired(instrument: CompiledInstrument): CompiledField[] {
  return instrument.fields.filter(({ level, required }) => level === 'unblinding' && required);
}

function anchorProblems(step: RunSheetStep, steps: RunSheetStep[], pointer: string): ProtocolProblem[] {
  if (step.anchor.kind === 'visit-start') return [];
  const place = `${pointer}/anchor/step`;
  const { step: key } = step.anchor;
  const anchor = steps.find((other) => other.key === key);
  if (!anchor) return [{ pointer: place, message: `There is no step ${key}` }];
  if (anchor.event === undefined)
    return [{ pointer: place, message: `${anchor.label} stamps no event to count from: name one` }];
  const seen = new Set<string>();
  for (let at: RunSheetStep | undefined = step; at; at = anchorOf(at, steps)) {
    if (seen.has(at.key))
      return [{ pointer: place, message: `Anchors go in a circle: ${[...seen].join(', ')}` }];
    seen.add(at.key);
  }
  return [];
}

function anchorOf(step: RunSheetStep, steps: RunSheetStep[]): RunSheetStep | undefined {
  const { anchor } = step;
  return anchor.kind === 'event' ? steps.find(({ key }) => key === anchor.step) : undefined;
}

function holdPointProblems(
  step: RunSheetStep,
  steps: RunSheetStep[],
  place: Place,
  pointer: string,
): ProtocolProblem[] {
  const { holdPoint } = step;
  if (!holdPoint) return [];
  if (holdPoint.kind === 'minutes-since') {
    const since = steps.find(({ key }) => key === holdPoint.step);
    const at = `${pointer}/holdPoint/step`;
    if (!since) return [{ pointer: at, message: `There is no step ${holdPoint.step}` }];
    if (since.event === undefined)
      return [{ pointer: at, message: `${since.label} stamps no event to count from: name one` }];
    return since.maximumMinutes !== undefined && since.maximumMinutes <= holdPoint.minutes
      ? [
          {
            pointer: `${pointer}/holdPoint/minutes`,
            message: `${since.label} may last ${since.maximumMinutes} min: the hold point never opens`,
          },
        ]
      : [];
  }
  const problems: ProtocolProblem[] = [];
  const variables: ExpressionVariables = {};
  for (const [name, reference] of Object.entries(holdPoint.inputs)) {
    const found = referencedField(reference, place);
    if ('message' in found)
      problems.push({ pointer: `${pointer}/holdPoint/inputs/${name}/${found.at}`, message: found.message });
    else if (found.field.type !== 'number' && found.field.type !== 'integer') {
      problems.push({
        pointer: `${pointer}/holdPoint/inputs/${name}/pointer`,
        message: `${found.field.label} is no number`,
      });
    } else variables[name] = found.field.readings ? 'list<double>' : 'double';
  }
  if (step.performedBy === 'coordinator' && holdPointLevel(step, place) === 'unblinding') {
    const message =
      'It reads a value that unblinds: the step belongs to the unblinded technician, who is told open or shut';
    problems.push({ pointer: `${pointer}/holdPoint`, message });
  }
  if (problems.length > 0) return problems;
  const expression = expressionCompiler(variables).compile(holdPoint.expression, 'bool');
  if (!('problems' in expression)) return [];
  return expression.problems.map(({ message }) => ({ pointer: `${pointer}/holdPoint/expression`, message }));
}
