import type { EntityManager } from '@mikro-orm/postgresql';
import type { LiveQuantityDto } from '#schemas/api/capture.ts';
import type { LiveQuantity, MeasuredQuantity } from '#schemas/protocol/protocol.ts';
import { currentActor } from '#backend/http/actor.ts';
import { instrumentLibrary, publishedInstrument } from '../instruments/index.ts';
import { EntrySchema } from './entry.entity.ts';
import { entryValues, storedValues } from './entry-values.ts';
import { visitMeasures, type StepValues, type VisitMeasure } from './measures.ts';
import { protocolOf, visitTypeNamed } from './run-sheet.ts';
import { VisitSchema, type Visit } from './visit.entity.ts';

/** The values of each step of a visit; void entries are out. */
export async function stepValues(em: EntityManager, visit: Visit): Promise<Map<string, StepValues>> {
  const entries = await em.find(EntrySchema, {
    studyId: visit.studyId,
    visitId: visit.id,
    state: { $ne: 'void' },
  });
  const stored = await storedValues(em, visit.studyId, entries);
  const steps = new Map<string, StepValues>();
  for (const entry of entries) {
    const { compiled } = await publishedInstrument(em, entry.instrumentVersionId);
    steps.set(entry.stepKey ?? '', { compiled, values: entryValues(stored.get(entry.id) ?? []) });
  }
  return steps;
}

/**
 * What the live column shows: the measures and the quantities computed from them, at each time point,
 * with the participant's visit before this one beside them. To a blinded person all that could tell the
 * arm is hidden in its place, its waiting included.
 */
export async function liveQuantities(em: EntityManager, visit: Visit): Promise<LiveQuantityDto[]> {
  const [earlier] = await em.find(
    VisitSchema,
    {
      studyId: visit.studyId,
      participantId: visit.participantId,
      startedAt: { $lt: visit.startedAt ?? new Date() },
    },
    { orderBy: { startedAt: 'desc' }, limit: 1 },
  );
  const now = await quantitiesOf(em, visit);
  const before = earlier === undefined ? [] : await quantitiesOf(em, earlier);
  const previous = new Map(before.map((row) => [`${row.key} ${row.timePoint}`, row.value]));
  const { unblinded } = currentActor();
  return now.map(({ unblinding, ...row }) => {
    if (unblinding && !unblinded)
      return { key: row.key, label: row.label, timePoint: row.timePoint, hidden: true };
    const earlierValue = previous.get(`${row.key} ${row.timePoint}`);
    return { ...row, ...(earlierValue === undefined ? {} : { previous: earlierValue }) };
  });
}

type Row = LiveQuantityDto & { unblinding: boolean };

async function quantitiesOf(em: EntityManager, visit: Visit): Promise<Row[]> {
  const { content } = await protocolOf(em, visit);
  const measures = visitMeasures(visitTypeNamed(content, visit.visitTypeKey), await stepValues(em, visit));
  const timePoints = [...new Set(measures.map(({ timePoint }) => timePoint))];
  return [
    ...measures.map(measureRow),
    ...timePoints.flatMap((timePoint) => {
      const here = measures.filter((measure) => measure.timePoint === timePoint);
      const rows: Row[] = [];
      for (const live of content.liveQuantities) rows.push(...computedRow(live, timePoint, here, rows));
      return rows;
    }),
  ];
}

const measureRow = (measure: VisitMeasure): Row => ({
  key: measure.quantity,
  label: quantityLabels[measure.quantity],
  timePoint: measure.timePoint,
  unblinding: measure.unblinding,
  unit: measure.unit,
  ...(measure.value === null ? { waiting: `waits for ${measure.waitingFor}` } : { value: measure.value }),
});

/** Nothing when the time point does not measure what the quantity needs; `before` holds the rows listed earlier. */
function computedRow(
  live: LiveQuantity,
  timePoint: string,
  measures: readonly VisitMeasure[],
  before: readonly Row[],
): Row[] {
  const inputs: Record<string, { value: number; unit: string }> = {};
  let { unblinding } = live;
  let waiting: string | null = null;
  for (const [name, source] of Object.entries(live.inputs)) {
    if (typeof source !== 'string' && 'unit' in source) {
      inputs[name] = source;
      continue;
    }
    if (typeof source !== 'string') {
      const row = before.find(({ key }) => key === source.live);
      if (row === undefined) return [];
      unblinding ||= row.unblinding;
      if (typeof row.value === 'number' && row.unit !== undefined)
        inputs[name] = { value: row.value, unit: row.unit };
      else waiting ??= `waits for ${row.label}`;
      continue;
    }
    const measure = measures.find(({ quantity }) => quantity === source);
    if (measure === undefined) return [];
    unblinding ||= measure.unblinding;
    if (measure.value === null) waiting ??= `waits for ${measure.waitingFor}`;
    else inputs[name] = { value: measure.value, unit: measure.unit };
  }
  const row = { key: live.key, label: live.label, timePoint, unblinding };
  if (waiting !== null) return [{ ...row, waiting }];
  return [{ ...row, ...computed(live.quantity, inputs) }];
}

function computed(name: string, inputs: Record<string, { value: number; unit: string }>): Partial<Row> {
  const quantity = instrumentLibrary.get(name);
  if (quantity === undefined) return { waiting: `no quantity is called ${name}` };
  try {
    return quantity.compute(inputs);
  } catch (error) {
    // A quantity refuses by throwing; its sentence is for the person at the screen.
    return { waiting: error instanceof Error ? error.message : 'cannot be computed' };
  }
}

const quantityLabels: Record<MeasuredQuantity, string> = {
  meanArterialPressure: 'Mean arterial pressure',
  systolicPressure: 'Systolic pressure',
  diastolicPressure: 'Diastolic pressure',
  heartRate: 'Heart rate',
  forearmBloodFlow: 'Forearm blood flow',
  controlForearmBloodFlow: 'Forearm blood flow, control arm',
  brachialBloodFlow: 'Brachial blood flow',
  haematocrit: 'Haematocrit',
  haemoglobin: 'Haemoglobin',
  plasmaViscosity: 'Plasma viscosity',
  bloodViscosity: 'Blood viscosity',
  totalProtein: 'Total protein',
  brachialDiameter: 'Brachial diameter',
  skinTemperature: 'Skin temperature',
};
