import type { EntityManager } from '@mikro-orm/postgresql';
import type { ConditionsDto, Labelled } from '#schemas/api/participants.ts';
import type { Protocol } from '#schemas/protocol/protocol.ts';
import { currentActor } from '#backend/http/actor.ts';
import { may } from '#backend/http/authorize.ts';
import { notFound } from '#backend/http/problem.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { AllocationSlotSchema } from './allocation.entity.ts';
import { ParticipantSchema, type Participant } from './participant.entity.ts';

/**
 * The condition that a participant is given in a period, for work done unblinded; null before allocation.
 * @throws Problem 404 for a blinded actor, to whom it does not exist
 */
export async function conditionOf(
  em: EntityManager,
  participantId: string,
  period: number,
): Promise<Labelled | null> {
  const { unblinded, role } = currentActor();
  // The study physician opens one participant by an act of its own, and learns of no other way.
  if (role !== 'system' && (!unblinded || role === 'study-physician')) throw notFound('This condition');
  const participant = await em.findOneOrFail(ParticipantSchema, participantId);
  const conditions = (await conditionsOf(em, [participant])).get(participantId);
  return conditions?.periods.find((one) => one.period === period)?.condition ?? null;
}

/**
 * Sequence and conditions by participant, for those who are allocated. Asks nobody's right: callers pass only
 * participants whose condition the actor may know (`knownConditions`).
 */
export async function conditionsOf(
  em: EntityManager,
  participants: readonly Participant[],
): Promise<Map<string, ConditionsDto>> {
  const slots = await em.find(AllocationSlotSchema, {
    participantId: { $in: participants.map(({ id }) => id) },
  });
  const versionIds = [...new Set(participants.map(({ protocolVersionId }) => protocolVersionId))];
  const versions = await em.find(ProtocolVersionSchema, { id: { $in: versionIds } });
  const protocols = new Map(versions.map(({ id, content }) => [id, content]));
  const sequences = new Map(slots.map(({ participantId, sequenceKey }) => [participantId, sequenceKey]));
  return new Map(
    participants.flatMap(({ id, protocolVersionId }) => {
      const sequence = sequences.get(id);
      const protocol = protocols.get(protocolVersionId);
      return sequence && protocol ? [[id, conditionsIn(protocol, sequence)] as const] : [];
    }),
  );
}

/** Those whose condition the actor may know: at work unblinded, or everybody's once the study is unblinded. */
export async function knownConditions(
  em: EntityManager,
  participants: readonly Participant[],
): Promise<Map<string, ConditionsDto>> {
  const studyIds = [...new Set(participants.map(({ studyId }) => studyId))];
  const unblinded = await em.find(StudySchema, { id: { $in: studyIds }, state: 'unblinded' });
  const open = new Set(unblinded.map(({ id }) => id));
  const known = participants.filter(
    ({ studyId, siteId }) => open.has(studyId) || may('read', 'AllocationSlot', { studyId, siteId }),
  );
  return known.length === 0 ? new Map() : conditionsOf(em, known);
}

function conditionsIn(protocol: Protocol, sequenceKey: string): ConditionsDto {
  const sequence = protocol.sequences.find(({ key }) => key === sequenceKey);
  if (sequence === undefined) throw new Error('The protocol no longer has the sequence of a slot.');
  const named = (key: string): Labelled => ({
    key,
    label: protocol.conditions.find((condition) => condition.key === key)?.label ?? key,
  });
  return {
    sequence: { key: sequence.key, label: sequence.label },
    periods: sequence.conditions.map((key, at) => ({ period: at + 1, condition: named(key) })),
  };
}
