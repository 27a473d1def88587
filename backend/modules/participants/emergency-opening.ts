import type { EntityManager } from '@mikro-orm/postgresql';
import type { EmergencyOpeningDto, SignedReasonBody } from '#schemas/api/participants.ts';
import { act } from '#backend/database/act.ts';
import { currentPersonId } from '#backend/http/actor.ts';
import { authorize } from '#backend/http/authorize.ts';
import { stateForbids } from '#backend/http/problem.ts';
import { confirmPassword } from '../accounts/index.ts';
import { EmergencyOpeningSchema } from './allocation.entity.ts';
import { conditionsOf } from './conditions.ts';
import { tellOthers } from './notify.ts';
import { readableParticipant } from './participant.queries.ts';
import { aboutParticipant } from './participant.service.ts';

/**
 * Opens one participant's condition to the study physician, alone and at once; a locked study does not stand in the
 * way. The others learn that it happened, not what was seen (RB-06).
 */
export async function openInEmergency(
  em: EntityManager,
  participantId: string,
  { reason, password }: SignedReasonBody,
): Promise<EmergencyOpeningDto> {
  const participant = await readableParticipant(em, participantId);
  const { id, studyId, siteId, code } = participant;
  authorize('open', 'AllocationSlot', { studyId, siteId }, 'Only the study physician opens a condition.');
  const conditions = (await conditionsOf(em, [participant])).get(id);
  if (conditions === undefined) {
    throw stateForbids('Nothing is allocated to this participant yet: there is no condition to open.');
  }
  await confirmPassword(em, currentPersonId(), password);
  const about = { kind: 'allocation-opened', subject: aboutParticipant(participant), reason };
  const opening = await act(em, about, async (tx) => {
    await tellOthers(tx, 'allocation-opened', ['principal-investigator', 'monitor']);
    return tx.create(EmergencyOpeningSchema, {
      studyId,
      participantId: id,
      openedById: currentPersonId(),
      openedAt: new Date(),
      reason,
    });
  });
  return { code, openedAt: opening.openedAt.toISOString(), ...conditions };
}
