import type { EntityManager } from '@mikro-orm/postgresql';
import type { VisitDto } from '#schemas/api/capture.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { fromCursor, pageSize, toCursor } from '#backend/http/list.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { visitTypeNamed } from './run-sheet.ts';
import { VisitSchema, type Visit } from './visit.entity.ts';
import { dayAt, presentVisit } from './visit.presenter.ts';

export interface VisitQuery {
  from?: string;
  to?: string;
  state?: string;
  participant?: string;
  cursor?: string;
  limit?: string;
}

/** Visits by planned day, a page at a time; only those the actor may know of. */
export async function listVisits(
  em: EntityManager,
  query: VisitQuery,
): Promise<{ items: VisitDto[]; nextCursor: string | null }> {
  const allowed = accessible('read', 'Visit');
  if (allowed === null) return { items: [], nextCursor: null };
  const after = fromCursor(query.cursor, 2);
  const limit = pageSize(query.limit);
  const conditions: object[] = [allowed];
  if (query.from !== undefined) conditions.push({ windowTo: { $gte: query.from } });
  if (query.to !== undefined) conditions.push({ plannedOn: { $lte: query.to } });
  if (query.state !== undefined) conditions.push({ state: query.state });
  if (query.participant !== undefined) conditions.push({ participantId: query.participant });
  if (after !== null) {
    const [day, id] = after as [string, string];
    conditions.push({ $or: [{ plannedOn: { $gt: day } }, { plannedOn: day, id: { $gt: id } }] });
  }
  const rows = await em.find(
    VisitSchema,
    { $and: conditions },
    { orderBy: { plannedOn: 'asc', id: 'asc' }, limit: limit + 1 },
  );
  const page = rows.slice(0, limit);
  const last = page.at(-1);
  return {
    items: await presentVisits(em, page),
    nextCursor: rows.length > limit && last ? toCursor([last.plannedOn, last.id]) : null,
  };
}

/** Presents many visits with one query for each kind of name around them. */
export async function presentVisits(em: EntityManager, visits: readonly Visit[]): Promise<VisitDto[]> {
  const ids = (pick: (visit: Visit) => string): string[] => [...new Set(visits.map(pick))];
  const participants = await em.find(ParticipantSchema, { id: { $in: ids((row) => row.participantId) } });
  const sites = await em.find(SiteSchema, { id: { $in: ids((row) => row.siteId) } });
  const protocols = await em.find(ProtocolVersionSchema, {
    id: { $in: ids((row) => row.protocolVersionId) },
  });
  const codes = new Map(participants.map(({ id, code }) => [id, code]));
  const days = new Map(sites.map(({ id, timeZone }) => [id, dayAt(timeZone)]));
  const contents = new Map(protocols.map(({ id, content }) => [id, content]));
  return visits.map((visit) => {
    const content = contents.get(visit.protocolVersionId);
    const label = content ? visitTypeNamed(content, visit.visitTypeKey).label : visit.visitTypeKey;
    return presentVisit(visit, codes.get(visit.participantId) ?? '', label, days.get(visit.siteId) ?? '');
  });
}
