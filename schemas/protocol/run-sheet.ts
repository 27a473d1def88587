import type { RunSheetStep, VisitType } from './protocol.ts';

/**
 * A visit type with its blocks written out: each step of a block comes again for each repeat, under the key
 * `step-repeat`, later by the block's spacing. Anchors and hold points between steps of one block stay within a repeat.
 */
export function withBlocksWrittenOut(visitType: VisitType): VisitType {
  const { blocks = [], ...rest } = visitType;
  if (blocks.length === 0) return rest;
  const runSheet = rest.runSheet.flatMap((step): RunSheetStep[] => {
    const block = blocks.find(({ steps }) => steps.includes(step.key));
    if (!block) return [step];
    return block.repeats.map((repeat, index) => {
      const within = (key: string) => (block.steps.includes(key) ? `${key}-${repeat.key}` : key);
      return {
        ...step,
        key: `${step.key}-${repeat.key}`,
        label: `${step.label}: ${repeat.label}`,
        anchor:
          step.anchor.kind === 'event' ? { ...step.anchor, step: within(step.anchor.step) } : step.anchor,
        // A step anchored within its repeat moves with it.
        plannedMinute:
          step.plannedMinute + (anchoredWithin(step, block.steps) ? 0 : index * block.minutesApart),
        ...(step.holdPoint ? { holdPoint: movedHoldPoint(step.holdPoint, within) } : {}),
      };
    });
  });
  return { ...rest, runSheet };
}

function anchoredWithin(step: RunSheetStep, steps: string[]): boolean {
  return step.anchor.kind === 'event' && steps.includes(step.anchor.step);
}

function movedHoldPoint(
  holdPoint: NonNullable<RunSheetStep['holdPoint']>,
  within: (key: string) => string,
): NonNullable<RunSheetStep['holdPoint']> {
  if (holdPoint.kind === 'minutes-since') return { ...holdPoint, step: within(holdPoint.step) };
  const inputs = Object.entries(holdPoint.inputs).map(([name, reference]) => [
    name,
    reference.visitType === undefined ? { ...reference, step: within(reference.step) } : reference,
  ]);
  return { ...holdPoint, inputs: Object.fromEntries(inputs) as typeof holdPoint.inputs };
}
