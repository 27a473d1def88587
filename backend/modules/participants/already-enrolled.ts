import type { EntityManager } from '@mikro-orm/postgresql';
import { may } from '#backend/http/authorize.ts';
import { Problem } from '#backend/http/problem.ts';
import { ParticipantSchema } from './participant.entity.ts';

/**
 * Refuses a second participant of the same name and birth date in one study, found by the keyed digest alone.
 * @throws Problem 409 `already-exists`, naming the code only to those who may know the participant
 */
export async function assertNotEnrolled(
  tx: EntityManager,
  studyId: string,
  index: Uint8Array,
  exceptId: string,
): Promise<void> {
  const [row] = await tx.execute<{ participant_id: string }[]>(
    `select participant_id from identity.direct_identifiers
      where study_id = ? and blind_index = decode(?, 'hex') and participant_id <> ?`,
    [studyId, Buffer.from(index).toString('hex'), exceptId],
  );
  if (row === undefined) return;
  const participant = await tx.findOneOrFail(ParticipantSchema, row.participant_id);
  throw alreadyEnrolled(may('read', 'Participant', participant) ? participant.code : null);
}

export const alreadyEnrolled = (code: string | null): Problem =>
  new Problem(
    409,
    'already-exists',
    code === null
      ? 'A person with this name and birth date is already enrolled in this study, at another site.'
      : `A person with this name and birth date is already enrolled in this study, as ${code}.`,
  );

/** True for the error of two enrolments of one person at the same instant. */
export const isEnrolledTwice = (error: unknown): boolean =>
  (error as { code?: string }).code === '23505' &&
  (error as { constraint?: string }).constraint === 'direct_identifiers_study_id_blind_index_unique';
