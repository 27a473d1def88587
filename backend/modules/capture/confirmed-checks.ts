import type { EntityManager } from '@mikro-orm/postgresql';
import { CheckOutcomeSchema, type Entry } from './entry.entity.ts';

/** Soft checks that were answered for values that still lie there: check → reason. */
export async function confirmedChecks(em: EntityManager, entry: Entry): Promise<Map<string, string>> {
  const present = new Set(Object.values(entry.content).map(({ value }) => value));
  const rows = await em.find(CheckOutcomeSchema, {
    studyId: entry.studyId,
    entryId: entry.id,
    outcome: 'confirmed',
  });
  return new Map(
    rows.filter(({ valueId }) => present.has(valueId)).map(({ checkId, reason }) => [checkId, reason ?? '']),
  );
}
