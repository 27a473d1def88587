import type { EntityManager } from '@mikro-orm/postgresql';
import type { AllocationOfParticipant, ConditionsDto, ParticipantDto } from '#schemas/api/participants.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { knownConditions } from './conditions.ts';
import type { Participant } from './participant.entity.ts';

/** Presents participants with one query for each kind of thing around them. */
export async function presentParticipants(
  em: EntityManager,
  participants: readonly Participant[],
): Promise<ParticipantDto[]> {
  if (participants.length === 0) return [];
  const ids = participants.map(({ id }) => id);
  const siteIds = [...new Set(participants.map(({ siteId }) => siteId))];
  const sites = await em.find(SiteSchema, { id: { $in: siteIds } });
  const siteCodes = new Map(sites.map(({ id, code }) => [id, code]));
  const around = {
    assigned: await assignedAt(em, ids),
    conditions: await knownConditions(em, participants),
    visits: await visitCounts(em, ids),
    openings: await openingsOf(em, ids),
  };
  return participants.map((row) => ({
    id: row.id,
    studyId: row.studyId,
    code: row.code,
    siteId: row.siteId,
    siteCode: siteCodes.get(row.siteId) ?? '',
    state: row.state,
    enrolledOn: row.enrolledOn,
    consentedOn: row.consentedOn ?? null,
    consentVersion: row.consentVersion ?? null,
    eligibleOn: row.eligibleOn ?? null,
    allocation: allocationOf(around.assigned.get(row.id), around.conditions.get(row.id)),
    withdrawal: withdrawalOf(row),
    visits: around.visits.get(row.id) ?? { completed: 0, missed: 0, planned: 0 },
    emergencyOpenings: around.openings.get(row.id) ?? [],
    protocolVersionId: row.protocolVersionId,
    revision: row.revision,
  }));
}

export const presentParticipant = async (
  em: EntityManager,
  participant: Participant,
): Promise<ParticipantDto> => (await presentParticipants(em, [participant]))[0]!;

function allocationOf(
  assignedAt: string | undefined,
  conditions: ConditionsDto | undefined,
): AllocationOfParticipant | null {
  if (assignedAt === undefined) return null;
  return conditions === undefined
    ? { assignedAt, hidden: true }
    : { assignedAt, hidden: false, sequence: conditions.sequence, periods: conditions.periods };
}

function withdrawalOf({
  withdrawnOn,
  earlierData,
  safetyFollowUp,
}: Participant): ParticipantDto['withdrawal'] {
  if (withdrawnOn == null || earlierData == null) return null;
  return { on: withdrawnOn, earlierData, safetyFollowUp: safetyFollowUp === true };
}

/** When each was assigned. The sequence is not even read, so that nothing of it can leave by mistake. */
async function assignedAt(em: EntityManager, ids: readonly string[]): Promise<Map<string, string>> {
  const rows = await em.execute<{ participant_id: string; assigned_at: string }[]>(
    'select participant_id, assigned_at from allocation_slot where participant_id = any(?::uuid[])',
    [asArray(ids)],
  );
  return new Map(rows.map((row) => [row.participant_id, new Date(row.assigned_at).toISOString()]));
}

/** Counted where they lie: visits belong to a later module, which this one may not import. */
async function visitCounts(
  em: EntityManager,
  ids: readonly string[],
): Promise<Map<string, ParticipantDto['visits']>> {
  const rows = await em.execute<
    { participant_id: string; completed: number; missed: number; planned: number }[]
  >(
    `select participant_id, (count(*) filter (where state = 'completed'))::int as completed,
            (count(*) filter (where state = 'missed'))::int as missed, count(*)::int as planned
       from visit where participant_id = any(?::uuid[]) group by participant_id`,
    [asArray(ids)],
  );
  return new Map(
    rows.map(({ participant_id, completed, missed, planned }) => [
      participant_id,
      { completed, missed, planned },
    ]),
  );
}

async function openingsOf(
  em: EntityManager,
  ids: readonly string[],
): Promise<Map<string, ParticipantDto['emergencyOpenings']>> {
  const rows = await em.execute<{ participant_id: string; opened_at: string; name: string }[]>(
    `select participant_id, opened_at, person.name from emergency_opening
       join person on person.id = opened_by_id
      where participant_id = any(?::uuid[]) order by opened_at`,
    [asArray(ids)],
  );
  const byParticipant = new Map<string, ParticipantDto['emergencyOpenings']>();
  for (const row of rows) {
    const known = byParticipant.get(row.participant_id) ?? [];
    known.push({ at: new Date(row.opened_at).toISOString(), by: row.name });
    byParticipant.set(row.participant_id, known);
  }
  return byParticipant;
}

const asArray = (ids: readonly string[]): string => `{${ids.join(',')}}`;
