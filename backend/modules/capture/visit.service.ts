import type { EntityManager } from '@mikro-orm/postgresql';
import type {
  BeginVisitBody,
  MissVisitBody,
  NoteDeviationBody,
  PlanVisitBody,
  RescheduleVisitBody,
  StampStepBody,
} from '#schemas/api/capture.ts';
import { act } from '#backend/database/act.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { invalidBody, stateForbids } from '#backend/http/problem.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { EntrySchema } from './entry.entity.ts';
import { protocolOf, stepOf, visitTypeOf } from './run-sheet.ts';
import { DeviationSchema, StepEventSchema, VisitSchema, type Visit } from './visit.entity.ts';
import { windowAround } from './visit-window.ts';

const aboutVisit = (visit: Visit) => ({
  type: 'visit',
  id: visit.id,
  participantId: visit.participantId,
  siteId: visit.siteId,
});

/** Loads a visit that the actor may know of. */
export async function loadVisit(em: EntityManager, visitId: string): Promise<Visit> {
  const visit = await em.findOne(VisitSchema, { studyId: currentStudyId(), id: visitId });
  assertReadable('Visit', visit, 'This visit');
  return visit as Visit;
}

/** Plans a visit of a type that the participant's protocol version has; its window comes from that type. */
export async function planVisit(
  em: EntityManager,
  participantId: string,
  { visitTypeKey, plannedOn }: PlanVisitBody,
): Promise<Visit> {
  const studyId = currentStudyId();
  const participant = await em.findOne(ParticipantSchema, { studyId, id: participantId });
  assertReadable('Participant', participant, 'This participant');
  const found = participant as NonNullable<typeof participant>;
  const protocol = await protocolOf(em, found);
  const type = protocol.content.visitTypes.find(({ key }) => key === visitTypeKey);
  if (type === undefined) {
    throw invalidBody([
      { pointer: '/visitTypeKey', detail: 'is no visit type of the participant’s protocol version' },
    ]);
  }
  authorize('create', 'Visit', { studyId, siteId: found.siteId, participantId });
  if (found.state === 'withdrawn')
    throw stateForbids('This participant has withdrawn; no visits are planned.');
  const known = await em.findOne(VisitSchema, { studyId, participantId, visitTypeKey });
  if (known !== null) throw stateForbids('This visit is planned already; reschedule it instead.');
  return act(em, { kind: 'visit-planned', subject: (row: Visit) => aboutVisit(row) }, async (tx) => {
    await assertStudyOpen(tx);
    return tx.create(VisitSchema, {
      studyId,
      participantId,
      siteId: found.siteId,
      protocolVersionId: found.protocolVersionId,
      visitTypeKey,
      plannedOn,
      ...windowAround(plannedOn, type),
    });
  });
}

/** Moves a planned visit to another day; the window stays where the protocol put it. */
export async function rescheduleVisit(
  em: EntityManager,
  visitId: string,
  seen: number,
  { plannedOn, reason }: RescheduleVisitBody,
): Promise<Visit> {
  return changeVisit(em, visitId, seen, { kind: 'visit-rescheduled', action: 'update', reason }, (visit) => {
    if (visit.state !== 'planned') throw stateForbids('Only a planned visit can be moved.');
    visit.plannedOn = plannedOn;
  });
}

/** Records that a visit did not take place, with a reason from the protocol's list. */
export async function missVisit(
  em: EntityManager,
  visitId: string,
  seen: number,
  { missedReason, note }: MissVisitBody,
): Promise<Visit> {
  const visit = await loadVisit(em, visitId);
  const { missedVisitReasons } = (await protocolOf(em, visit)).content;
  if (!missedVisitReasons.includes(missedReason)) {
    throw invalidBody([
      { pointer: '/missedReason', detail: `must be one of ${missedVisitReasons.join(', ')}` },
    ]);
  }
  const about = { kind: 'visit-missed', action: 'update', reason: note ?? missedReason } as const;
  return changeVisit(em, visitId, seen, about, (row) => {
    if (row.state !== 'planned') throw stateForbids('A visit that has begun is not missed.');
    row.state = 'missed';
    row.missedReason = missedReason;
  });
}

/** Begins a visit: the minutes of its run sheet count from here. */
export async function beginVisit(
  em: EntityManager,
  visitId: string,
  seen: number,
  { startedAt }: BeginVisitBody,
): Promise<Visit> {
  assertNotAhead(startedAt, '/startedAt');
  return changeVisit(em, visitId, seen, { kind: 'visit-begun', action: 'update', reason: null }, (visit) => {
    if (visit.state !== 'planned') throw stateForbids('This visit has begun already, or was missed.');
    visit.state = 'under-way';
    visit.startedAt = new Date(startedAt);
  });
}

/** Completes a visit: every step that needs an entry has one that is complete, or was skipped with a reason. */
export async function completeVisit(em: EntityManager, visitId: string, seen: number): Promise<Visit> {
  const visit = await loadVisit(em, visitId);
  const type = await visitTypeOf(em, visit);
  const entries = await em.find(EntrySchema, { studyId: visit.studyId, visitId });
  const skipped = await em.find(StepEventSchema, { studyId: visit.studyId, visitId, kind: 'skipped' });
  const done = new Set([
    ...entries.filter(({ state }) => state === 'complete').map(({ stepKey }) => stepKey),
    ...skipped.map(({ stepKey }) => stepKey),
  ]);
  const open = type.runSheet.filter(({ key, instrument }) => instrument !== undefined && !done.has(key));
  if (open.length > 0) {
    throw stateForbids(
      `Still open: ${open.map(({ label }) => label).join(', ')}. Complete or skip each with a reason.`,
    );
  }
  return changeVisit(
    em,
    visitId,
    seen,
    { kind: 'visit-completed', action: 'complete', reason: null },
    (row) => {
      if (row.state !== 'under-way') throw stateForbids('Only a visit that is under way can be completed.');
      row.state = 'completed';
      row.endedAt = new Date();
    },
  );
}

/** Stamps a press on the run sheet; passing a hold point or skipping a step is a deviation too. */
export async function stampStep(em: EntityManager, visitId: string, body: StampStepBody): Promise<Visit> {
  const visit = await loadVisit(em, visitId);
  authorize('update', 'Visit', visit);
  assertNotAhead(body.observedAt, '/observedAt');
  const step = stepOf(await visitTypeOf(em, visit), body.stepKey);
  if (step === undefined) throw invalidBody([{ pointer: '/stepKey', detail: 'is no step of this visit' }]);
  const needsReason = ['hold-passed', 'skipped', 'distress-stop'].includes(body.kind);
  if (needsReason && body.reason === undefined) {
    throw invalidBody([
      { pointer: '/reason', detail: 'is required to pass a hold point, skip a step or stop' },
    ]);
  }
  if (visit.state !== 'under-way') throw stateForbids('Begin the visit first.');
  await act(
    em,
    { kind: 'step-stamped', subject: aboutVisit(visit), reason: body.reason ?? null },
    async (tx) => {
      await assertStudyOpen(tx);
      tx.create(StepEventSchema, {
        studyId: visit.studyId,
        visitId: visit.id,
        stepKey: body.stepKey,
        kind: body.kind,
        observedAt: new Date(body.observedAt),
        reason: body.reason ?? null,
      });
      if (!needsReason) return;
      tx.create(DeviationSchema, {
        studyId: visit.studyId,
        siteId: visit.siteId,
        participantId: visit.participantId,
        visitId: visit.id,
        stepKey: body.stepKey,
        origin: 'run-sheet',
        description: `${step.label}: ${deviationWords[body.kind as keyof typeof deviationWords]}`,
        reason: body.reason ?? null,
        notedAt: new Date(),
      });
    },
  );
  return visit;
}

const deviationWords = {
  'hold-passed': 'hold point passed before it held',
  skipped: 'step skipped',
  'distress-stop': 'stopped, participant distress',
};

/** Notes a deviation of the visit in a person's own words. */
export async function noteDeviation(
  em: EntityManager,
  visitId: string,
  body: NoteDeviationBody,
): Promise<Visit> {
  const visit = await loadVisit(em, visitId);
  const { studyId, siteId, participantId } = visit;
  const facts = { studyId, siteId, participantId, level: body.level ?? ('open' as const) };
  authorize('create', 'Deviation', facts);
  await act(em, { kind: 'deviation-noted', subject: aboutVisit(visit) }, async (tx) => {
    await assertStudyOpen(tx);
    tx.create(DeviationSchema, {
      ...facts,
      visitId,
      stepKey: body.stepKey ?? null,
      origin: 'person',
      description: body.description,
      reason: body.reason ?? null,
      notedAt: new Date(),
    });
  });
  return visit;
}

async function changeVisit(
  em: EntityManager,
  visitId: string,
  seen: number,
  about: { kind: string; action: 'update' | 'complete'; reason: string | null },
  change: (visit: Visit) => void,
): Promise<Visit> {
  const visit = await loadVisit(em, visitId);
  assertRevision(visit, seen);
  authorize(about.action, 'Visit', visit);
  return act(em, { kind: about.kind, subject: aboutVisit(visit), reason: about.reason }, async (tx) => {
    await assertStudyOpen(tx);
    const row = await tx.findOneOrFail(VisitSchema, visit.id);
    change(row);
    return row;
  });
}

/** An entered time may be late, never ahead of the server's clock by more than two minutes. */
function assertNotAhead(instant: string, pointer: string): void {
  if (Date.parse(instant) <= Date.now() + 120_000) return;
  throw invalidBody([{ pointer, detail: 'lies in the future; check the clock of this device' }]);
}
