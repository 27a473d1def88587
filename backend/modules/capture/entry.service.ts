import type { EntityManager } from '@mikro-orm/postgresql';
import type { CorrectEntryBody, OpenLogEntryBody, SaveEntryBody } from '#schemas/api/capture.ts';
import { checkValues, type Finding } from '#schemas/instruments/check-values.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { act } from '#backend/database/act.ts';
import { recordRevision } from '#backend/database/trail/act-context.ts';
import { currentActor, currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { lostToTwin, seenBefore, type IdempotencyKey } from '#backend/http/idempotency.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { invalidBody, notFound, Problem, stateForbids } from '#backend/http/problem.ts';
import { instrumentLibrary } from '../instruments/index.ts';
import { InstrumentVersionSchema } from '../instruments/instrument.entity.ts';
import { assertConsented, recordConsent } from '../participants/index.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { changedSince } from './changed-since.ts';
import { confirmedChecks } from './confirmed-checks.ts';
import { EntrySchema, type Entry } from './entry.entity.ts';
import { entryValues, type StoredValue } from './entry-values.ts';
import { messageFor } from './finding-message.ts';
import { tellCheckConfirmed, tellValuesChanged } from './hooks.ts';
import { loadEntry, type LoadedEntry } from './load-entry.ts';
import { planSave, readOperations, type Judged, type SavePlan } from './plan-save.ts';
import { contentHashOf, storeSave } from './store-values.ts';
import { stepOf, visitTypeOf } from './run-sheet.ts';
import { VisitSchema, type Visit } from './visit.entity.ts';

const aboutEntry = (entry: Entry) => ({
  type: 'entry',
  id: entry.id,
  participantId: entry.participantId,
  siteId: entry.siteId,
});

/** Saves values of an open entry: each field stands or falls by itself, and all that stands is one revision. */
export async function saveEntry(
  em: EntityManager,
  entryId: string,
  seen: number,
  body: SaveEntryBody,
  key: IdempotencyKey | null,
): Promise<LoadedEntry> {
  const loaded = await loadEntry(em, entryId);
  if (await seenBefore(em, key)) return loaded;
  await assertFresh(em, loaded, seen);
  if (loaded.entry.state !== 'open') {
    throw stateForbids('This entry is complete; correct it with a reason, or void it.');
  }
  authorize('update', 'Entry', loaded.entry, 'This step is done by someone else; you can read it only.');
  const plan = decide(loaded, body, 'open');
  await storePlan(em, loaded, plan, { kind: 'entry-saved', reason: null, key });
  assertSomethingStored(plan, body, loaded);
  return { ...(await loadEntry(em.fork(), entryId)), refused: plan.refused };
}

/** Corrects a completed entry: a reason is on record, the old value stays readable (DE-01). */
export async function correctEntry(
  em: EntityManager,
  entryId: string,
  seen: number,
  body: CorrectEntryBody,
  key: IdempotencyKey | null,
): Promise<LoadedEntry> {
  const loaded = await loadEntry(em, entryId);
  if (await seenBefore(em, key)) return loaded;
  await assertFresh(em, loaded, seen);
  if (loaded.entry.state !== 'complete') throw stateForbids('Only a completed entry is corrected.');
  authorize('correct', 'Entry', loaded.entry);
  const plan = decide(loaded, body, 'complete');
  if (plan.refused.length > 0) {
    await storePlan(
      em,
      loaded,
      { ...plan, stored: [], derived: {} },
      { kind: 'entry-saved', reason: null, key: null },
    );
    throw refusedProblem(plan.refused, loaded.instrument.compiled);
  }
  const open = blocking(
    loaded.instrument.compiled,
    plan.values,
    new Set(plan.confirmed.map((one) => one.finding.checkId)),
  );
  if (open.length > 0) throw incompleteProblem(open);
  await storePlan(em, loaded, plan, { kind: 'entry-corrected', reason: body.reason, key });
  return loadEntry(em.fork(), entryId);
}

/** Completes an entry: required fields, counts and all checks hold, or were answered; from then on corrections. */
export async function completeEntry(
  em: EntityManager,
  entryId: string,
  seen: number,
  key: IdempotencyKey | null,
): Promise<LoadedEntry> {
  const loaded = await loadEntry(em, entryId);
  if (await seenBefore(em, key)) return loaded;
  await assertFresh(em, loaded, seen);
  const { entry, instrument, stored } = loaded;
  if (entry.state !== 'open') throw stateForbids('This entry is not open any more.');
  authorize('complete', 'Entry', entry);
  const confirmed = await confirmedChecks(em, entry);
  const open = blocking(instrument.compiled, entryValues(stored), new Set(confirmed.keys()));
  if (open.length > 0) throw incompleteProblem(open);
  await act(em, { kind: 'entry-completed', subject: aboutEntry(entry), idempotency: key }, async (tx) => {
    await assertStudyOpen(tx);
    const row = await tx.findOneOrFail(EntrySchema, { studyId: entry.studyId, id: entry.id });
    assertRevision(row, seen);
    row.state = 'complete';
    row.completedAt = new Date();
    recordRevision({
      entryId: row.id,
      revision: row.revision + 1,
      contentHash: row.contentHash,
      changes: {},
    });
    await recordConsentOf(tx, row, stored);
  });
  return loadEntry(em.fork(), entryId);
}

/** Voids an entry with a reason: readable for ever, out of analysis; nothing is deleted (DE-08). */
export async function voidEntry(
  em: EntityManager,
  entryId: string,
  seen: number,
  reason: string,
  key: IdempotencyKey | null,
): Promise<LoadedEntry> {
  const loaded = await loadEntry(em, entryId);
  if (await seenBefore(em, key)) return loaded;
  await assertFresh(em, loaded, seen);
  if (loaded.entry.state === 'void') throw stateForbids('This entry is void already.');
  authorize('void', 'Entry', loaded.entry);
  await act(
    em,
    { kind: 'entry-voided', subject: aboutEntry(loaded.entry), reason, idempotency: key },
    async (tx) => {
      await assertStudyOpen(tx);
      const row = await tx.findOneOrFail(EntrySchema, { studyId: loaded.entry.studyId, id: entryId });
      assertRevision(row, seen);
      row.state = 'void';
      recordRevision({
        entryId: row.id,
        revision: row.revision + 1,
        contentHash: row.contentHash,
        changes: {},
      });
      await tellValuesChanged(tx, row, Object.keys(row.content), 'voided');
    },
  );
  return loadEntry(em.fork(), entryId);
}

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
      await assertConsented(tx, participantId);
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

/** Reads and judges a request; what no field can hold stops it whole, before anything is stored. */
function decide(
  { instrument, stored }: LoadedEntry,
  body: SaveEntryBody,
  stage: 'open' | 'complete',
): SavePlan {
  const { changes, problems } = readOperations(instrument.compiled, body.operations, instrument.judge);
  if (problems.length > 0) throw invalidBody(problems);
  const confirmations = new Map((body.confirmations ?? []).map(({ checkId, reason }) => [checkId, reason]));
  return planSave(instrument.compiled, instrumentLibrary, entryValues(stored), changes, {
    confirmations,
    stage,
  });
}

async function storePlan(
  em: EntityManager,
  { entry, instrument, stored }: LoadedEntry,
  plan: SavePlan,
  about: { kind: string; reason: string | null; key: IdempotencyKey | null },
): Promise<void> {
  try {
    await act(
      em,
      { kind: about.kind, subject: aboutEntry(entry), reason: about.reason, idempotency: about.key },
      async (tx) => {
        await assertStudyOpen(tx);
        const row = await tx.findOneOrFail(EntrySchema, { studyId: entry.studyId, id: entry.id });
        const addresses = storeSave(tx, row, instrument.compiled, plan, stored);
        if (addresses.length > 0) await tellValuesChanged(tx, row, addresses, 'value-changed');
        for (const judged of plan.confirmed) {
          if (judged.finding.opensQuery) await tellCheckConfirmed(tx, row, judged);
        }
      },
    );
  } catch (error) {
    if (!lostToTwin(error)) throw error;
  }
}

async function assertFresh(em: EntityManager, loaded: LoadedEntry, seen: number): Promise<void> {
  if (loaded.entry.revision === seen) return;
  assertRevision(loaded.entry, seen, { changed: await changedSince(em, loaded, seen) });
}

/** When all that was sent was turned away the answer is a refusal; the attempt is on record. */
function assertSomethingStored(plan: SavePlan, body: SaveEntryBody, { instrument }: LoadedEntry): void {
  if (plan.stored.length === 0 && body.operations.length > 0)
    throw refusedProblem(plan.refused, instrument.compiled);
}

function refusedProblem(refused: readonly Judged[], compiled: CompiledInstrument): Problem {
  const { unblinded } = currentActor();
  return new Problem(
    422,
    'fields-refused',
    'An edit check did not let this pass; correct the value, or confirm it with a reason where the check asks.',
    refused.map(({ change, finding }) => ({
      pointer: change.address,
      detail: messageFor(finding, unblinded),
    })),
    {
      refused: refused.map(({ change, finding }) => ({
        pointer: change.address,
        checkId: finding.checkId,
        severity: finding.severity,
        message: messageFor(finding, unblinded),
      })),
      instrument: compiled.title,
    },
  );
}

/** Findings that keep an entry from being complete: hard ones, and soft ones without an answer. */
const blocking = (
  compiled: CompiledInstrument,
  values: Parameters<typeof checkValues>[1],
  answered: ReadonlySet<string>,
) =>
  checkValues(compiled, values, { stage: 'complete' }).filter(
    ({ severity, checkId }) => severity === 'hard' || !answered.has(checkId),
  );

function incompleteProblem(findings: readonly Finding[]): Problem {
  const { unblinded } = currentActor();
  return new Problem(
    422,
    'fields-refused',
    'This entry cannot be completed yet; each point is named below.',
    findings.map((finding) => ({
      pointer: finding.pointers[0] ?? '',
      detail: messageFor(finding, unblinded),
    })),
    {
      refused: findings.map((finding) => ({
        pointer: finding.pointers[0] ?? '',
        checkId: finding.checkId,
        severity: finding.severity,
        message: messageFor(finding, unblinded),
      })),
    },
  );
}

/** A completed consent entry is what puts the participant on record as consented. */
async function recordConsentOf(
  tx: EntityManager,
  entry: Entry,
  stored: readonly StoredValue[],
): Promise<void> {
  if (entry.instrumentKey !== 'consent') return;
  const values = entryValues(stored);
  const date = values['/consentDate'];
  const version = values['/consentVersion'];
  if (typeof date !== 'string' || typeof version !== 'string') {
    throw stateForbids('The consent instrument needs the fields consentDate and consentVersion.');
  }
  await recordConsent(tx, entry.participantId, { date, version });
}
