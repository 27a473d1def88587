import type { EntityManager } from '@mikro-orm/postgresql';
import type { QueryDto } from '#schemas/api/monitoring.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { fromCursor, pageSize, toCursor } from '#backend/http/list.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { presentVisits } from '../capture/index.ts';
import { EntrySchema } from '../capture/entry.entity.ts';
import { VisitSchema } from '../capture/visit.entity.ts';
import { publishedInstrument } from '../instruments/index.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { QueryMessageSchema, QuerySchema, type Query } from './monitoring.entity.ts';

export interface QueryFilter {
  state?: string;
  participant?: string;
  visit?: string;
  cursor?: string;
  limit?: string;
}

/** Queries oldest first, a page at a time; those the actor may not know of are not among them. */
export async function listQueries(
  em: EntityManager,
  filter: QueryFilter,
): Promise<{ items: QueryDto[]; nextCursor: string | null }> {
  const allowed = accessible('read', 'Query');
  if (allowed === null) return { items: [], nextCursor: null };
  const conditions: object[] = [allowed];
  if (filter.state !== undefined) conditions.push({ state: filter.state });
  if (filter.participant !== undefined) conditions.push({ participantId: filter.participant });
  if (filter.visit !== undefined) conditions.push({ visitId: filter.visit });
  const after = fromCursor(filter.cursor, 2) as [string, string] | null;
  if (after !== null) {
    const [openedAt, id] = after;
    conditions.push({
      $or: [{ openedAt: { $gt: new Date(openedAt) } }, { openedAt: new Date(openedAt), id: { $gt: id } }],
    });
  }
  const limit = pageSize(filter.limit);
  const rows = await em.find(
    QuerySchema,
    { $and: conditions },
    { orderBy: { openedAt: 'asc', id: 'asc' }, limit: limit + 1 },
  );
  const page = rows.slice(0, limit);
  const last = page.at(-1);
  return {
    items: await presentQueries(em, page),
    nextCursor: rows.length > limit && last ? toCursor([last.openedAt.toISOString(), last.id]) : null,
  };
}

export async function presentQueries(em: EntityManager, queries: readonly Query[]): Promise<QueryDto[]> {
  const ids = (pick: (query: Query) => string | null | undefined): string[] => [
    ...new Set(queries.flatMap((query) => pick(query) ?? [])),
  ];
  const messages = await em.find(
    QueryMessageSchema,
    { queryId: { $in: ids(({ id }) => id) } },
    { orderBy: { at: 'asc' } },
  );
  const people = await em.find(PersonSchema, {
    id: { $in: [...ids(({ openedById }) => openedById), ...messages.map(({ authorId }) => authorId)] },
  });
  const names = new Map(people.map(({ id, name }) => [id, name]));
  const participants = await em.find(ParticipantSchema, { id: { $in: ids((query) => query.participantId) } });
  const codes = new Map(participants.map(({ id, code }) => [id, code]));
  const visits = await presentVisits(
    em,
    await em.find(VisitSchema, { id: { $in: ids((query) => query.visitId) } }),
  );
  const labels = new Map(visits.map(({ id, label }) => [id, label]));
  return Promise.all(
    queries.map(async (query) => ({
      id: query.id,
      state: query.state,
      revision: query.revision,
      participantId: query.participantId,
      participantCode: codes.get(query.participantId) ?? '',
      visitId: query.visitId ?? null,
      visitLabel: labels.get(query.visitId ?? '') ?? null,
      entryId: query.entryId ?? null,
      address: query.address ?? null,
      fieldLabel: await fieldLabel(em, query),
      performedBy: query.performedBy,
      checkId: query.checkId ?? null,
      openedBy: names.get(query.openedById) ?? '',
      openedAt: query.openedAt.toISOString(),
      ageDays: Math.floor((Date.now() - query.openedAt.getTime()) / 86_400_000),
      messages: messages
        .filter(({ queryId }) => queryId === query.id)
        .map(({ authorId, kind, text, at }) => ({
          author: names.get(authorId) ?? '',
          kind,
          text,
          at: at.toISOString(),
        })),
    })),
  );
}

async function fieldLabel(em: EntityManager, query: Query): Promise<string | null> {
  if (query.entryId == null) return null;
  const entry = await em.findOne(EntrySchema, { studyId: query.studyId, id: query.entryId });
  if (entry === null) return null;
  const { compiled } = await publishedInstrument(em, entry.instrumentVersionId);
  const [, pointer, reading] = /^(.*?)(?:\/(\d+))?$/.exec(query.address ?? '') ?? [];
  const field = compiled.field(pointer ?? '');
  if (field === undefined) return compiled.title;
  return reading === undefined ? field.label : `${field.label}, reading ${Number(reading) + 1}`;
}
