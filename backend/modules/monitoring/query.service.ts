import type { EntityManager } from '@mikro-orm/postgresql';
import type { AskQueryBody } from '#schemas/api/monitoring.ts';
import { act } from '#backend/database/act.ts';
import { currentActor, currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { invalidBody, notAllowed, stateForbids } from '#backend/http/problem.ts';
import { EntrySchema, type Entry } from '../capture/entry.entity.ts';
import { VisitSchema } from '../capture/visit.entity.ts';
import { publishedInstrument } from '../instruments/index.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { QueryMessageSchema, QuerySchema, type Query, type QueryMessage } from './monitoring.entity.ts';

const aboutQuery = (query: Query) => ({
  type: 'query',
  id: query.id,
  participantId: query.participantId,
  siteId: query.siteId,
});

export async function loadQuery(em: EntityManager, id: string): Promise<Query> {
  const query = await em.findOne(QuerySchema, { studyId: currentStudyId(), id });
  assertReadable('Query', query, 'This query');
  return query as Query;
}

/** Asks about a participant, a visit, an entry or one field; the side that did the step answers. */
export async function askQuery(em: EntityManager, body: AskQueryBody): Promise<Query> {
  const facts = await factsOf(em, body);
  authorize('ask', 'Query', facts);
  return act(em, { kind: 'query-asked', subject: (row: Query) => aboutQuery(row) }, async (tx) => {
    await assertStudyOpen(tx);
    return openQuery(tx, { ...facts, checkId: null }, body.text);
  });
}

/** Makes the query and its first message inside an act that is under way. */
export async function openQuery(
  tx: EntityManager,
  facts: Omit<Awaited<ReturnType<typeof factsOf>>, never> & { checkId: string | null },
  text: string,
): Promise<Query> {
  const query = tx.create(QuerySchema, { ...facts, openedById: currentPersonId(), openedAt: new Date() });
  await tx.flush();
  addMessage(tx, query, 'asked', text);
  return query;
}

/** A reply of the side that did the step. */
export const replyToQuery = (em: EntityManager, id: string, seen: number, text: string): Promise<Query> =>
  changeQuery(
    em,
    id,
    seen,
    { kind: 'query-replied', action: 'reply', from: ['asked'], to: 'replied', message: 'replied' },
    text,
  );

/** Settles a query; who answered last does not settle it (SV-05). */
export const settleQuery = (em: EntityManager, id: string, seen: number, text: string): Promise<Query> =>
  changeQuery(
    em,
    id,
    seen,
    {
      kind: 'query-settled',
      action: 'settle',
      from: ['asked', 'replied'],
      to: 'settled',
      message: 'settled',
    },
    text,
  );

/** Opens a settled query again; its thread stays. */
export const reopenQuery = (em: EntityManager, id: string, seen: number, text: string): Promise<Query> =>
  changeQuery(
    em,
    id,
    seen,
    { kind: 'query-reopened', action: 'settle', from: ['settled'], to: 'asked', message: 'reopened' },
    text,
  );

interface Change {
  kind: string;
  action: 'reply' | 'settle';
  from: Query['state'][];
  to: Query['state'];
  message: QueryMessage['kind'];
}

async function changeQuery(
  em: EntityManager,
  id: string,
  seen: number,
  change: Change,
  text: string,
): Promise<Query> {
  const query = await loadQuery(em, id);
  assertRevision(query, seen);
  authorize(change.action, 'Query', query, 'This query is for someone else to answer or settle.');
  if (!change.from.includes(query.state))
    throw stateForbids(`The query is ${query.state}; this cannot be done now.`);
  if (change.to === 'settled') await assertNotOwnReply(em, query);
  return act(em, { kind: change.kind, subject: aboutQuery(query) }, async (tx) => {
    await assertStudyOpen(tx);
    const row = await tx.findOneOrFail(QuerySchema, query.id);
    row.state = change.to;
    addMessage(tx, row, change.message, text);
    return row;
  });
}

async function assertNotOwnReply(em: EntityManager, query: Query): Promise<void> {
  const [last] = await em.find(
    QueryMessageSchema,
    { studyId: query.studyId, queryId: query.id, kind: 'replied' },
    { orderBy: { at: 'desc' }, limit: 1 },
  );
  if (last?.authorId === currentPersonId()) throw notAllowed('Who answers a query does not settle it.');
}

function addMessage(tx: EntityManager, query: Query, kind: QueryMessage['kind'], text: string): void {
  const { studyId, id: queryId } = query;
  tx.create(QueryMessageSchema, {
    studyId,
    queryId,
    authorId: currentPersonId(),
    kind,
    text,
    at: new Date(),
  });
}

/** Where a query stands and how much it reveals: a query on a hidden field is hidden itself. */
async function factsOf(em: EntityManager, body: AskQueryBody) {
  const studyId = currentStudyId();
  const participant = await em.findOne(ParticipantSchema, { studyId, id: body.participantId });
  assertReadable('Participant', participant, 'This participant');
  const { siteId, id: participantId } = participant as NonNullable<typeof participant>;
  const common = {
    studyId,
    siteId,
    participantId,
    level: 'open' as const,
    performedBy: 'coordinator' as const,
  };
  if (body.entryId !== undefined) {
    const entry = await em.findOne(EntrySchema, { studyId, id: body.entryId, participantId });
    assertReadable('Entry', entry, 'This entry');
    return { ...common, ...(await entryFacts(em, entry as Entry, body.address ?? null)) };
  }
  if (body.visitId !== undefined) {
    const visit = await em.findOne(VisitSchema, { studyId, id: body.visitId, participantId });
    assertReadable('Visit', visit, 'This visit');
    return { ...common, visitId: body.visitId, entryId: null, address: null };
  }
  return { ...common, visitId: null, entryId: null, address: null };
}

/** The facts of a query on an entry's field; used by people and by checks alike. */
export async function entryFacts(em: EntityManager, entry: Entry, address: string | null) {
  const { compiled } = await publishedInstrument(em, entry.instrumentVersionId);
  const pointer = address?.replace(/\/\d+$/, '');
  const field = pointer === undefined ? undefined : compiled.field(pointer);
  if (pointer !== undefined && field === undefined) {
    throw invalidBody([{ pointer: '/address', detail: `is no field of ${compiled.title}` }]);
  }
  const level =
    field?.level ?? (compiled.fields.some((one) => one.level === 'unblinding') ? 'unblinding' : 'open');
  if (level === 'unblinding' && !currentActor().unblinded) {
    // A blinded person asks about the entry as a whole; what is hidden is asked by unblinded members.
    if (address !== null)
      throw notAllowed('This field is hidden until unblinding; an unblinded member asks about it.');
  }
  return {
    visitId: entry.visitId ?? null,
    entryId: entry.id,
    address,
    performedBy: entry.performedBy,
    level: address === null && !currentActor().unblinded ? ('open' as const) : level,
  };
}
