import { LockMode, type EntityManager } from '@mikro-orm/postgresql';
import { act } from '#backend/database/act.ts';
import { authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { stateForbids } from '#backend/http/problem.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { assertStudyOpen } from '../studies/index.ts';
import {
  AllocationListSchema,
  AllocationSlotSchema,
  type AllocationList,
  type AllocationSlot,
} from './allocation.entity.ts';
import { ParticipantSchema, type Participant } from './participant.entity.ts';
import { readableParticipant } from './participant.queries.ts';
import { aboutParticipant } from './participant.service.ts';

/** Ends the second of two assignments without a trace: the first one answers. */
class AssignedAlready extends Error {}

/**
 * Gives a participant the next place of the sealed list at its site, for good (RB-02, RB-03). Whoever asks learns
 * that it was done, not what it is. Asked twice, it answers the same; refused, it uses no place.
 */
export async function assignAllocation(
  em: EntityManager,
  participantId: string,
  seen: number,
): Promise<Participant> {
  const known = await readableParticipant(em, participantId);
  authorize('assign', 'Participant', known);
  try {
    return await act(em, { kind: 'allocation-assigned', subject: aboutParticipant(known) }, (tx) =>
      assign(tx, participantId, seen),
    );
  } catch (error) {
    if (error instanceof AssignedAlready) return readableParticipant(em.fork(), participantId);
    throw error;
  }
}

async function assign(tx: EntityManager, participantId: string, seen: number): Promise<Participant> {
  await assertStudyOpen(tx);
  const lock = { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true } as const;
  const participant = await tx.findOneOrFail(ParticipantSchema, participantId, lock);
  if ((await tx.count(AllocationSlotSchema, { participantId })) > 0) throw new AssignedAlready();
  assertRevision(participant, seen);
  assertReady(participant);
  const slot = await nextSlot(tx, participant);
  slot.participantId = participant.id;
  slot.siteId = participant.siteId;
  slot.assignedAt = new Date();
  participant.state = 'allocated';
  return participant;
}

function assertReady({ state, eligibleOn }: Participant): void {
  if (state === 'screening') throw stateForbids('Record the consent first: a place is given after it.');
  if (state === 'withdrawn')
    throw stateForbids('This participant has withdrawn; no place is given any more.');
  if (state !== 'consented') throw stateForbids('This participant takes no place any more.');
  if (eligibleOn == null) throw stateForbids('Confirm first that the criteria for taking part are met.');
}

/** The next place in order, under the list's lock: no two assignments see the same one. */
async function nextSlot(tx: EntityManager, { studyId, siteId }: Participant): Promise<AllocationSlot> {
  const list = await tx.findOne(AllocationListSchema, { studyId }, { lockMode: LockMode.PESSIMISTIC_WRITE });
  if (list === null) throw stateForbids('No allocation list is sealed in this study.');
  const atSite = (await isStratified(tx, list)) ? { siteId } : {};
  const slot = await tx.findOne(
    AllocationSlotSchema,
    { listId: list.id, participantId: null, ...atSite },
    { orderBy: { position: 'asc' } },
  );
  if (slot === null)
    throw stateForbids('All places of the sealed list are used at this site; tell the investigator.');
  return slot;
}

/** As the protocol said when the list was sealed; an amendment does not change a list. */
async function isStratified(tx: EntityManager, { studyId, sealedAt }: AllocationList): Promise<boolean> {
  const version = await tx.findOneOrFail(
    ProtocolVersionSchema,
    { studyId, publishedAt: { $lte: sealedAt } },
    { orderBy: { version: 'desc' } },
  );
  return version.content.allocation.stratifyBySite;
}
