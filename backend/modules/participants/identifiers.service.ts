import type { EntityManager } from '@mikro-orm/postgresql';
import type { IdentifiersDto, WriteIdentifiersBody } from '#schemas/api/participants.ts';
import type { IdentityKeys } from '#backend/config/settings.ts';
import { act } from '#backend/database/act.ts';
import { authorize, may } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { invalidBody, notFound } from '#backend/http/problem.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { alreadyEnrolled, assertNotEnrolled, isEnrolledTwice } from './already-enrolled.ts';
import { DirectIdentifiersSchema, type DirectIdentifiers } from './direct-identifiers.entity.ts';
import { assertPlausible, openIdentifiers, sealedIdentifiers } from './identifiers.ts';
import { tellOthers } from './notify.ts';
import type { Participant } from './participant.entity.ts';
import { readableParticipant } from './participant.queries.ts';
import { urgentAccessUntil } from './urgent-access.ts';

const aboutIdentifiers = ({ id, siteId }: Participant) => ({
  type: 'direct-identifiers',
  id,
  participantId: id,
  siteId,
});

/**
 * Shows who a participant is, and writes down that it was shown (CP-05). Who does not look after the participant
 * needs a reason, which opens the identifiers for some minutes and is told to others (AC-07).
 */
export async function readIdentifiers(
  em: EntityManager,
  keys: IdentityKeys,
  participantId: string,
  reason: string | null,
): Promise<IdentifiersDto> {
  const participant = await readableParticipant(em, participantId);
  const { studyId, siteId } = participant;
  const urgent = !may('read', 'DirectIdentifiers', { studyId, siteId });
  if (urgent) authorize('open', 'DirectIdentifiers', { studyId, siteId });
  if (urgent && reason === null && (await urgentAccessUntil(em, participantId)) === null)
    throw reasonMissing();
  const row = await act(
    em,
    { kind: 'identifiers-read', subject: aboutIdentifiers(participant), reason },
    async (tx) => {
      if (urgent && reason !== null)
        await tellOthers(tx, 'identifiers-opened', ['principal-investigator', 'monitor']);
      return storedIdentifiers(tx, participantId);
    },
  );
  const until = urgent ? await urgentAccessUntil(em, participantId) : null;
  return { ...openIdentifiers(keys, row), revision: row.revision, until: until?.toISOString() ?? null };
}

/** Corrects identifiers, all of them anew under the current key. */
export async function writeIdentifiers(
  em: EntityManager,
  keys: IdentityKeys,
  participantId: string,
  seen: number,
  { identifiers, reason }: WriteIdentifiersBody,
): Promise<DirectIdentifiers> {
  const participant = await readableParticipant(em, participantId);
  const { studyId, siteId } = participant;
  authorize('update', 'DirectIdentifiers', { studyId, siteId });
  assertPlausible(identifiers);
  try {
    return await act(
      em,
      { kind: 'identifiers-written', subject: aboutIdentifiers(participant), reason },
      async (tx) => {
        await assertStudyOpen(tx);
        const row = await storedIdentifiers(tx, participantId);
        assertRevision(row, seen);
        const sealed = sealedIdentifiers(keys, participant, identifiers);
        await assertNotEnrolled(tx, studyId, sealed.blindIndex, participantId);
        return Object.assign(row, sealed);
      },
    );
  } catch (error) {
    throw isEnrolledTwice(error) ? alreadyEnrolled(null) : error;
  }
}

async function storedIdentifiers(tx: EntityManager, participantId: string): Promise<DirectIdentifiers> {
  const row = await tx.findOne(DirectIdentifiersSchema, { participantId });
  if (row === null) throw notFound('These identifiers');
  return row;
}

const reasonMissing = () =>
  invalidBody([
    {
      pointer: '/reason',
      detail:
        'Say why you must know who this is: the look is written down, told to others, and ends by itself.',
    },
  ]);
