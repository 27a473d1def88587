import type { EntityManager } from '@mikro-orm/postgresql';
import { canonicalHash } from '#backend/database/trail/canonical.ts';
import { stepOf, visitTypeOf } from '../capture/index.ts';
import { EntrySchema } from '../capture/entry.entity.ts';
import type { Visit } from '../capture/visit.entity.ts';
import { SourceDocumentSchema } from '../source/source-document.entity.ts';
import type { SignedContent } from './records.entity.ts';

/** What a signature on a visit covers: its entries with their values, and the source files attached. */
export async function coveredBy(em: EntityManager, visit: Visit): Promise<SignedContent['covered']> {
  const { studyId, id: visitId } = visit;
  const type = await visitTypeOf(em, visit);
  const entries = await em.find(EntrySchema, { studyId, visitId }, { orderBy: { id: 'asc' } });
  const documents = await em.find(SourceDocumentSchema, { studyId, visitId }, { orderBy: { id: 'asc' } });
  return [
    ...entries.map((entry) => ({
      type: 'entry',
      id: entry.id,
      revision: entry.revision,
      hash: canonicalHash({ content: entry.contentHash, state: entry.state }),
      label: stepOf(type, entry.stepKey ?? '')?.label ?? entry.instrumentKey,
    })),
    ...documents.map((document) => ({
      type: 'source-document',
      id: document.id,
      revision: document.revision,
      hash: canonicalHash({ sha256: document.sha256, replacedBy: document.replacedById ?? null }),
      label: `source: ${document.kind.replaceAll('-', ' ')}`,
    })),
  ];
}

/** Labels of what is no longer what was signed: changed, gone, or added since. */
export function changedSince(signed: SignedContent['covered'], present: SignedContent['covered']): string[] {
  const now = new Map(present.map((item) => [item.id, item]));
  const then = new Set(signed.map(({ id }) => id));
  return [
    ...signed.filter(({ id, hash }) => now.get(id)?.hash !== hash).map(({ label }) => label),
    ...present.filter(({ id }) => !then.has(id)).map(({ label }) => `${label} (added)`),
  ];
}
