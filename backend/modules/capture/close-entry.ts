import type { EntityManager } from '@mikro-orm/postgresql';
import type { CompleteEntryBody } from '#schemas/api/capture.ts';
import type { Finding } from '#schemas/instruments/check-values.ts';
import { act } from '#backend/database/act.ts';
import { recordRevision } from '#backend/database/trail/act-context.ts';
import { authorize } from '#backend/http/authorize.ts';
import { seenBefore, type IdempotencyKey } from '#backend/http/idempotency.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { stateForbids } from '#backend/http/problem.ts';
import { recordCompletion, recordConsent } from '../participants/index.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { aboutEntry } from './about-entry.ts';
import { assertFresh } from './changed-since.ts';
import { confirmedChecks } from './confirmed-checks.ts';
import { CheckOutcomeSchema, EntrySchema, type Entry } from './entry.entity.ts';
import { blocking, incompleteProblem } from './entry-problems.ts';
import { enteredValues, entryValues, type StoredValue } from './entry-values.ts';
import { tellValuesChanged } from './hooks.ts';
import { loadEntry, type LoadedEntry } from './load-entry.ts';

/** Completes an entry: required fields, counts and all checks hold, or were answered; from then on corrections. */
export async function completeEntry(
  em: EntityManager,
  entryId: string,
  seen: number,
  { confirmations = [] }: CompleteEntryBody,
  key: IdempotencyKey | null,
): Promise<LoadedEntry> {
  const loaded = await loadEntry(em, entryId);
  if (await seenBefore(em, key)) return loaded;
  await assertFresh(em, loaded, seen);
  const { entry, instrument, stored } = loaded;
  if (entry.state !== 'open') throw stateForbids('This entry is not open any more.');
  authorize('complete', 'Entry', entry);
  const confirmed = await confirmedChecks(em, entry);
  const waiting = blocking(instrument, enteredValues(instrument.compiled, stored), new Set(confirmed.keys()));
  const answers = new Map(confirmations.map(({ checkId, reason }) => [checkId, reason]));
  const answered = waiting.filter(({ severity, checkId }) => severity === 'soft' && answers.has(checkId));
  const open = waiting.filter((finding) => !answered.includes(finding));
  if (open.length > 0) throw incompleteProblem(open);
  await act(em, { kind: 'entry-completed', subject: aboutEntry(entry), idempotency: key }, async (tx) => {
    await assertStudyOpen(tx);
    const row = await tx.findOneOrFail(EntrySchema, { studyId: entry.studyId, id: entry.id });
    assertRevision(row, seen);
    for (const finding of answered) recordAnswer(tx, row, finding, answers.get(finding.checkId) ?? '');
    row.state = 'complete';
    row.completedAt = new Date();
    recordRevision({
      entryId: row.id,
      revision: row.revision + 1,
      contentHash: row.contentHash,
      changes: {},
    });
    await recordConsentOf(tx, row, stored);
    await recordCompletionOf(tx, row, stored);
  });
  return loadEntry(em.fork(), entryId);
}

/** A check answered at completion stands on record with the values it spoke of. */
function recordAnswer(tx: EntityManager, entry: Entry, finding: Finding, reason: string): void {
  const touched = Object.entries(entry.content).filter(([address]) =>
    finding.pointers.some((pointer) => address === pointer || address.startsWith(`${pointer}/`)),
  );
  for (const [address, { value }] of touched) {
    tx.create(CheckOutcomeSchema, {
      studyId: entry.studyId,
      entryId: entry.id,
      address,
      checkId: finding.checkId,
      instrumentVersionId: entry.instrumentVersionId,
      severity: 'soft',
      valueId: value,
      outcome: 'confirmed',
      reason,
      level: finding.level,
      at: new Date(),
    });
  }
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

/** A completed consent entry is what puts the participant on record as consented. */
async function recordConsentOf(
  tx: EntityManager,
  entry: Entry,
  stored: readonly StoredValue[],
): Promise<void> {
  if (entry.instrumentKey !== 'consent') return;
  const values = entryValues(stored);
  const date = values['/consentedOn'];
  const version = values['/consentVersion'];
  if (typeof date !== 'string' || typeof version !== 'string') {
    throw stateForbids('The consent instrument needs the fields consentedOn and consentVersion.');
  }
  await recordConsent(tx, entry.participantId, { date, version });
}

/** A completed form on the end of participation ends it, where it says that all was done. */
async function recordCompletionOf(
  tx: EntityManager,
  entry: Entry,
  stored: readonly StoredValue[],
): Promise<void> {
  if (entry.instrumentKey !== 'end-of-participation') return;
  if (entryValues(stored)['/status'] === 'completed') await recordCompletion(tx, entry.participantId);
}
