import { LockMode, type EntityManager } from '@mikro-orm/postgresql';
import { stateForbids } from '#backend/http/problem.ts';
import { ParticipantSchema } from './participant.entity.ts';

/**
 * Ends taking part as the protocol planned it, inside the act that completes the form on the end of participation.
 * @throws Problem 409 before consent and after a withdrawal
 */
export async function recordCompletion(tx: EntityManager, participantId: string): Promise<void> {
  const lock = { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true } as const;
  const participant = await tx.findOneOrFail(ParticipantSchema, participantId, lock);
  if (participant.state === 'withdrawn') {
    throw stateForbids(
      'This participant has withdrawn: the form cannot say that participation was completed.',
    );
  }
  if (participant.state === 'screening') throw stateForbids('Record the consent first.');
  participant.state = 'completed';
}
