import type { EntityManager } from '@mikro-orm/postgresql';
import { instrumentLibrary } from '../instruments/index.ts';
import type { CorrectEntryBody, SaveEntryBody } from '#schemas/api/capture.ts';
import { act } from '#backend/database/act.ts';
import { authorize } from '#backend/http/authorize.ts';
import { lostToTwin, seenBefore, type IdempotencyKey } from '#backend/http/idempotency.ts';
import { invalidBody, stateForbids } from '#backend/http/problem.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { aboutEntry } from './about-entry.ts';
import { assertFresh } from './changed-since.ts';
import { EntrySchema } from './entry.entity.ts';
import { blocking, incompleteProblem, refusedProblem } from './entry-problems.ts';
import { enteredValues } from './entry-values.ts';
import { tellCheckConfirmed, tellValuesChanged } from './hooks.ts';
import { loadEntry, type LoadedEntry } from './load-entry.ts';
import { planSave, readOperations, type SavePlan } from './plan-save.ts';
import { storeSave } from './store-values.ts';

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
  if (plan.stored.length === 0) throw refusedProblem(plan.refused);
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
    throw refusedProblem(plan.refused);
  }
  const open = blocking(
    loaded.instrument,
    plan.entered,
    new Set(plan.confirmed.map((one) => one.finding.checkId)),
  );
  if (open.length > 0) throw incompleteProblem(open);
  await storePlan(em, loaded, plan, { kind: 'entry-corrected', reason: body.reason, key });
  return loadEntry(em.fork(), entryId);
}

/** Reads and judges a request; what no field can hold stops it whole, before anything is stored. */
function decide(
  { instrument, stored }: LoadedEntry,
  body: SaveEntryBody,
  stage: 'open' | 'complete',
): SavePlan {
  const { changes, problems } = readOperations(instrument.compiled, body.operations, (address, value) =>
    instrument.validator.field(address, value).map(({ message }) => message),
  );
  if (problems.length > 0) throw invalidBody(problems);
  const confirmations = new Map((body.confirmations ?? []).map(({ checkId, reason }) => [checkId, reason]));
  return planSave(
    instrument.compiled,
    instrumentLibrary,
    enteredValues(instrument.compiled, stored),
    changes,
    {
      confirmations,
      stage,
    },
  );
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
