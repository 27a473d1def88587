import type { EntityManager } from '@mikro-orm/postgresql';
import type { AllocationDto, WorklistItemDto } from '#schemas/api/participants.ts';
import type { OpenedAllocation } from '#schemas/participants/verify-allocation.ts';
import type { Protocol } from '#schemas/protocol/protocol.ts';
import type { IdentityKeys } from '#backend/config/settings.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { fromCursor, pageSize, toCursor } from '#backend/http/list.ts';
import { notFound, stateForbids } from '#backend/http/problem.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { AllocationListSchema, AllocationSlotSchema } from './allocation.entity.ts';
import { conditionsOf } from './conditions.ts';
import { ParticipantSchema } from './participant.entity.ts';
import { openMaking, wholeStudy } from './seal-allocation.ts';

/** When the list was sealed, its public digest, and how many places are used; nothing of what they hold. */
export async function allocationOverview(em: EntityManager): Promise<AllocationDto> {
  const studyId = currentStudyId();
  const list = await em.findOne(AllocationListSchema, { studyId });
  const version = await em.findOne(ProtocolVersionSchema, { studyId }, { orderBy: { version: 'desc' } });
  const sites = await em.execute<AllocationDto['sites']>(
    `select site.code as "siteCode", site.name as "siteName", count(participant.id)::int as enrolled,
            count(slot.id)::int as assigned
       from site left join participant on participant.site_id = site.id
       left join allocation_slot slot on slot.participant_id = participant.id
      where site.study_id = ? group by site.id order by site.code`,
    [studyId],
  );
  return {
    sequences: version?.content.sequences.length ?? 0,
    sealed:
      list === null
        ? null
        : {
            sealedAt: list.sealedAt.toISOString(),
            sealedBy: (await em.findOneOrFail(PersonSchema, list.sealedById)).name,
            commitment: list.commitment,
            slots: list.slots,
          },
    assigned: sites.reduce((sum, { assigned }) => sum + assigned, 0),
    sites,
  };
}

/**
 * What to prepare and to take for those who are taking part, participant by participant. Places that are not assigned
 * are shown to nobody.
 */
export async function listWorklist(
  em: EntityManager,
  query: { cursor?: string; limit?: string },
): Promise<{ items: WorklistItemDto[]; nextCursor: string | null }> {
  const allowed = accessible('read', 'AllocationSlot');
  if (allowed === null) return { items: [], nextCursor: null };
  const after = fromCursor(query.cursor, 1);
  const limit = pageSize(query.limit);
  const assigned = em
    .getKnex()
    .select('participant_id')
    .from('allocation_slot')
    .where('study_id', currentStudyId())
    .whereNotNull('participant_id');
  const found = await em.find(
    ParticipantSchema,
    {
      $and: [
        allowed,
        { id: { $in: assigned }, state: 'allocated' },
        after === null ? {} : { code: { $gt: String(after[0]) } },
      ],
    },
    { orderBy: { code: 'asc' }, limit: limit + 1 },
  );
  const page = found.slice(0, limit);
  const conditions = await conditionsOf(em, page);
  const versionIds = [...new Set(page.map(({ protocolVersionId }) => protocolVersionId))];
  const versions = await em.find(ProtocolVersionSchema, { id: { $in: versionIds } });
  const protocols = new Map(versions.map(({ id, content }) => [id, content]));
  const sites = await em.find(SiteSchema, { studyId: currentStudyId() });
  const siteCodes = new Map(sites.map(({ id, code }) => [id, code]));
  const items = page.flatMap((row) =>
    (conditions.get(row.id)?.periods ?? []).map(({ period, condition }) => ({
      participantId: row.id,
      code: row.code,
      siteCode: siteCodes.get(row.siteId) ?? '',
      period,
      condition,
      visits: visitsOf(protocols.get(row.protocolVersionId), period),
    })),
  );
  return { items, nextCursor: found.length > limit ? toCursor([page.at(-1)!.code]) : null };
}

function visitsOf(protocol: Protocol | undefined, period: number): WorklistItemDto['visits'] {
  const visitTypes = protocol?.visitTypes.filter((visitType) => visitType.period === period) ?? [];
  return visitTypes.map(({ key, label, runSheet }) => ({
    key,
    label,
    steps: runSheet
      .filter(({ performedBy }) => performedBy === 'unblinded-technician')
      .map((step) => ({ label: step.label, plannedMinute: step.plannedMinute })),
  }));
}

/** Opens the sealed list for everybody who knew its digest, once the study is unblinded (RB-12). */
export async function openAllocation(em: EntityManager, keys: IdentityKeys): Promise<OpenedAllocation> {
  const studyId = currentStudyId();
  const list = await em.findOne(AllocationListSchema, { studyId });
  if (list === null) throw notFound('An allocation list');
  const study = await em.findOneOrFail(StudySchema, studyId);
  if (study.state !== 'unblinded') throw stateForbids('The list is opened after the study is unblinded.');
  const { seed, salt, strata, sequences, blockSizes } = openMaking(keys, list);
  const sites = await em.find(SiteSchema, { studyId });
  const siteCodes = new Map(sites.map(({ id, code }) => [id, code]));
  const whole = strata.some(({ key }) => key === wholeStudy);
  const slots = await em.find(AllocationSlotSchema, { listId: list.id }, { orderBy: { position: 'asc' } });
  const stored = slots.map(({ siteId, position, sequenceKey }) => ({
    stratum: whole ? wholeStudy : (siteCodes.get(siteId) ?? ''),
    position,
    sequence: sequenceKey,
  }));
  return {
    commitment: list.commitment,
    seed,
    salt,
    strata,
    sequences,
    blockSizes,
    list: strata.flatMap(({ key }) => stored.filter(({ stratum }) => stratum === key)),
  };
}
