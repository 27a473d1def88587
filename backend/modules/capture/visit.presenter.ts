import type { EntityManager } from '@mikro-orm/postgresql';
import type { RunSheetDto, VisitDto } from '#schemas/api/capture.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { EntrySchema } from './entry.entity.ts';
import { protocolOf, visitTypeNamed } from './run-sheet.ts';
import { DeviationSchema, StepEventSchema, type Visit } from './visit.entity.ts';

/** A visit as lists and the run sheet show it. */
export function presentVisit(visit: Visit, participantCode: string, label: string, today: string): VisitDto {
  return {
    id: visit.id,
    participantId: visit.participantId,
    participantCode,
    siteId: visit.siteId,
    visitTypeKey: visit.visitTypeKey,
    label,
    state: visit.state,
    plannedOn: visit.plannedOn,
    windowFrom: visit.windowFrom,
    windowTo: visit.windowTo,
    startedAt: visit.startedAt?.toISOString() ?? null,
    endedAt: visit.endedAt?.toISOString() ?? null,
    missedReason: visit.missedReason ?? null,
    overdue: visit.state === 'planned' && visit.windowTo < today,
    revision: visit.revision,
  };
}

/** The calendar day at a place: a visit is due by the site's own day. */
export const dayAt = (timeZone: string, instant = new Date()): string =>
  new Intl.DateTimeFormat('sv-SE', { timeZone }).format(instant);

/** One visit with the names around it. */
export async function presentOneVisit(em: EntityManager, visit: Visit): Promise<VisitDto> {
  const [participant, site, protocol] = await Promise.all([
    em.findOneOrFail(ParticipantSchema, visit.participantId),
    em.findOneOrFail(SiteSchema, visit.siteId),
    protocolOf(em, visit),
  ]);
  const { label } = visitTypeNamed(protocol.content, visit.visitTypeKey);
  return presentVisit(visit, participant.code, label, dayAt(site.timeZone));
}

/** The whole run sheet: steps, stamps, entries and deviations; deviations that would tell the arm stay out. */
export async function presentRunSheet(em: EntityManager, visit: Visit): Promise<RunSheetDto> {
  const { studyId, id: visitId } = visit;
  const protocol = await protocolOf(em, visit);
  const participant = await em.findOneOrFail(ParticipantSchema, visit.participantId);
  const site = await em.findOneOrFail(SiteSchema, visit.siteId);
  const events = await em.find(StepEventSchema, { studyId, visitId }, { orderBy: { observedAt: 'asc' } });
  const entries = await em.find(EntrySchema, { studyId, visitId, state: { $ne: 'void' } });
  const allowed = accessible('read', 'Deviation');
  const deviations =
    allowed === null ? [] : await em.find(DeviationSchema, { $and: [allowed, { studyId, visitId }] });
  const { content } = protocol;
  return {
    visit: await presentOneVisit(em, visit),
    participantState: participant.state,
    timeZone: site.timeZone,
    serverTime: new Date().toISOString(),
    protocolVersion: protocol.version,
    visitType: visitTypeNamed(content, visit.visitTypeKey),
    missedVisitReasons: content.missedVisitReasons,
    safetyLimits: content.safetyLimits,
    events: events.map(({ id, stepKey, kind, observedAt, reason }) => ({
      id,
      stepKey,
      kind,
      observedAt: observedAt.toISOString(),
      reason: reason ?? null,
    })),
    entries: entries.map(({ id, stepKey, instrumentVersionId, state, revision }) => ({
      id,
      stepKey: stepKey ?? '',
      instrumentVersionId,
      state,
      revision,
    })),
    deviations: deviations.map(({ id, stepKey, origin, description, reason, notedAt }) => ({
      id,
      stepKey: stepKey ?? null,
      origin,
      description,
      reason: reason ?? null,
      notedAt: notedAt.toISOString(),
    })),
  };
}
