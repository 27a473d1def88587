import type { EntityManager } from '@mikro-orm/postgresql';
import type { EntryDto, FindingDto, HiddenValue, ValueDto } from '#schemas/api/capture.ts';
import { checkValues } from '#schemas/instruments/check-values.ts';
import { currentActor } from '#backend/http/actor.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { confirmedChecks } from './confirmed-checks.ts';
import { messageFor } from './finding-message.ts';
import type { LoadedEntry } from './load-entry.ts';
import { entryValues } from './entry-values.ts';
import { presentValue } from './present-value.ts';

/** The entry as its viewer may know it; each field that leaves is named here. */
export async function presentEntry(em: EntityManager, loaded: LoadedEntry): Promise<EntryDto> {
  const { entry, instrument, stored, refused } = loaded;
  const { compiled, version } = instrument;
  const { unblinded } = currentActor();
  const participant = await em.findOneOrFail(ParticipantSchema, entry.participantId);
  const values: Record<string, ValueDto | HiddenValue> = {};
  const derived: Record<string, ValueDto | HiddenValue> = {};
  for (const value of stored) {
    const into = compiled.field(value.address)?.derived ? derived : values;
    into[value.address] = presentValue(compiled, value);
  }
  return {
    id: entry.id,
    state: entry.state,
    revision: entry.revision,
    visitId: entry.visitId ?? null,
    stepKey: entry.stepKey ?? null,
    participantId: entry.participantId,
    participantCode: participant.code,
    performedBy: entry.performedBy,
    instrument: {
      versionId: version.id,
      key: version.key,
      version: version.version,
      title: version.title,
      hash: version.hash,
    },
    completedAt: entry.completedAt?.toISOString() ?? null,
    contentHash: entry.contentHash,
    values,
    derived,
    findings: await findings(em, loaded),
    refused: refused.map(({ change, finding }) => ({
      pointer: change.address,
      checkId: finding.checkId,
      severity: finding.severity,
      message: messageFor(finding, unblinded),
    })),
  };
}

/** What the checks say of the present values; those on hidden fields are for unblinded members only. */
async function findings(
  em: EntityManager,
  { entry, instrument, stored }: LoadedEntry,
): Promise<FindingDto[]> {
  const confirmed = await confirmedChecks(em, entry);
  const { unblinded } = currentActor();
  return checkValues(instrument.compiled, entryValues(stored), { stage: 'open' })
    .filter(({ level }) => unblinded || level === 'open')
    .map(({ checkId, severity, pointers, message }) => {
      const reason = confirmed.get(checkId);
      return { checkId, severity, pointers, message, ...(reason === undefined ? {} : { confirmed: reason }) };
    });
}
