import type { EntityManager } from '@mikro-orm/postgresql';
import { onCapture } from '../capture/index.ts';
import { onSourceReplaced } from '../source/index.ts';
import { VerificationMarkSchema, type VerificationMark } from './monitoring.entity.ts';
import { entryFacts, openQuery } from './query.service.ts';

async function fall(
  tx: EntityManager,
  where: Partial<Pick<VerificationMark, 'studyId' | 'entryId' | 'sourceDocumentId'>> & {
    address?: { $in: string[] };
  },
  because: NonNullable<VerificationMark['fallenBecause']>,
): Promise<void> {
  for (const mark of await tx.find(VerificationMarkSchema, { ...where, fallenAt: null })) {
    mark.fallenAt = new Date();
    mark.fallenBecause = because;
  }
}

/** Marks fall inside the very act that changes what they vouched for; a confirmed check may open a query there. */
export function followCaptureAndSource(): void {
  onCapture(listener);
  onSourceReplaced(sourceListener);
}

const listener = {
  valuesChanged: async (
    tx: EntityManager,
    entry: { studyId: string; id: string },
    addresses: readonly string[],
    because: 'value-changed' | 'voided',
  ): Promise<void> => {
    await fall(tx, { studyId: entry.studyId, entryId: entry.id, address: { $in: [...addresses] } }, because);
  },
  checkConfirmed: async (
    tx: EntityManager,
    entry: Parameters<typeof entryFacts>[1],
    judged: {
      change: { address: string };
      finding: { checkId: string; message: string };
      reason: string | null;
    },
  ): Promise<void> => {
    const { studyId, siteId, participantId } = entry;
    const facts = { studyId, siteId, participantId, ...(await entryFacts(tx, entry, judged.change.address)) };
    await openQuery(
      tx,
      { ...facts, checkId: judged.finding.checkId },
      `${judged.finding.message} Confirmed: ${judged.reason ?? ''}`,
    );
  },
};

const sourceListener = (tx: EntityManager, document: { studyId: string; id: string }): Promise<void> =>
  fall(tx, { studyId: document.studyId, sourceDocumentId: document.id }, 'source-replaced');
