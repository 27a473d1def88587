import type { EntityManager } from '@mikro-orm/postgresql';
import type { OpenLogEntryBody } from '#schemas/api/capture.ts';
import { act } from '#backend/database/act.ts';
import { currentActor, currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { notFound, stateForbids } from '#backend/http/problem.ts';
import { InstrumentVersionSchema } from '../instruments/instrument.entity.ts';
import { assertConsented } from '../participants/index.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { aboutEntry } from './about-entry.ts';
import { EntrySchema, type Entry } from './entry.entity.ts';
import { loadEntry, type LoadedEntry } from './load-entry.ts';
import { stepOf, visitTypeOf } from './run-sheet.ts';
import { contentHashOf } from './store-values.ts';
import { VisitSchema, type Visit } from './visit.entity.ts';

/** Opens the entry of a step; asked twice, the same one is given. */
export async function openStepEntry(
  em: EntityManager,
  visitId: string,
  stepKey: string,
): Promise<LoadedEntry> {
  const visit = await em.findOne(VisitSchema, { studyId: currentStudyId(), id: visitId });
  assertReadable('Visit', visit, 'This visit');
  const found = visit as Visit;
  const existing = await openEntryOf(em, found, stepKey);
  if (existing !== null) return loadEntry(em, existing.id);
  if (found.state !== 'under-way')
    throw stateForbids('Begin the visit first; then its steps can be filled in.');
  const step = stepOf(await visitTypeOf(em, found), stepKey);
  if (step?.instrument === undefined) throw notFound('A step with an instrument of this name');
  const version = await currentVersion(em, found.studyId, step.instrument);
  const facts = {
    studyId: found.studyId,
    siteId: found.siteId,
    participantId: found.participantId,
    performedBy: step.performedBy,
    state: 'open',
  };
  authorize('create', 'Entry', facts, `This step is done by the ${step.performedBy.replace('-', ' ')}.`);
  const entry = await act(
    em,
    { kind: 'entry-opened', subject: (row: Entry) => aboutEntry(row) },
    async (tx) => {
      await assertStudyOpen(tx);
      // The visit's row is the gate: two people who open the same step at once get one entry.
      await tx.execute('select id from visit where id = ? for update', [found.id]);
      const twin = await openEntryOf(tx, found, stepKey);
      if (twin !== null) return twin;
      if (step.instrument !== 'consent') await assertConsented(tx, found.participantId);
      return tx.create(EntrySchema, {
        ...facts,
        state: 'open',
        visitId: found.id,
        stepKey,
        instrumentVersionId: version.id,
        instrumentKey: version.key,
        content: {},
        contentHash: contentHashOf({}),
      });
    },
  );
  return loadEntry(em.fork(), entry.id);
}

/** Opens an entry in a participant's own log: an adverse event, a medication. */
export async function openLogEntry(
  em: EntityManager,
  participantId: string,
  { instrumentKey }: OpenLogEntryBody,
): Promise<LoadedEntry> {
  const studyId = currentStudyId();
  const participant = await em.findOne(ParticipantSchema, { studyId, id: participantId });
  assertReadable('Participant', participant, 'This participant');
  const found = participant as NonNullable<typeof participant>;
  const protocol = await em.findOneOrFail(ProtocolVersionSchema, found.protocolVersionId);
  if (!protocol.content.participantLogs.some(({ instrument }) => instrument === instrumentKey)) {
    throw notFound('A log of this name');
  }
  const version = await currentVersion(em, studyId, instrumentKey);
  const { role } = currentActor();
  const facts = {
    studyId,
    siteId: found.siteId,
    participantId,
    performedBy:
      role === 'study-physician' || role === 'unblinded-technician' ? role : ('coordinator' as const),
  };
  authorize('create', 'Entry', { ...facts, state: 'open' });
  const entry = await act(
    em,
    { kind: 'entry-opened', subject: (row: Entry) => aboutEntry(row) },
    async (tx) => {
      await assertStudyOpen(tx);
      // Adverse events are followed up after a withdrawal too, where the participant allowed it (CP-03).
      await assertConsented(tx, participantId, { safetyFollowUp: instrumentKey === 'adverse-event' });
      return tx.create(EntrySchema, {
        ...facts,
        state: 'open',
        instrumentVersionId: version.id,
        instrumentKey: version.key,
        content: {},
        contentHash: contentHashOf({}),
      });
    },
  );
  return loadEntry(em.fork(), entry.id);
}

async function currentVersion(em: EntityManager, studyId: string, key: string) {
  const version = await em.findOne(
    InstrumentVersionSchema,
    { studyId, key },
    { orderBy: { version: 'desc' } },
  );
  if (version === null) throw stateForbids(`The instrument ${key} is not published in this study yet.`);
  return version;
}

const openEntryOf = (em: EntityManager, visit: Visit, stepKey: string): Promise<Entry | null> =>
  em.findOne(EntrySchema, { studyId: visit.studyId, visitId: visit.id, stepKey, state: { $ne: 'void' } });
