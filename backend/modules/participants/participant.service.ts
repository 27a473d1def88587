import { LockMode, type EntityManager } from '@mikro-orm/postgresql';
import type { ConfirmEligibilityBody, WithdrawParticipantBody } from '#schemas/api/participants.ts';
import { act } from '#backend/database/act.ts';
import { authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { stateForbids } from '#backend/http/problem.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { SiteSchema, type Site } from '../studies/site.entity.ts';
import { dayAt } from './day-at.ts';
import { ParticipantSchema, type Participant } from './participant.entity.ts';
import { readableParticipant } from './participant.queries.ts';

export const aboutParticipant = ({ id, siteId }: Participant) => ({
  type: 'participant',
  id,
  participantId: id,
  siteId,
});

/** Confirms that the criteria for taking part were checked and are met; nothing is allocated before (RB-02). */
export async function confirmEligibility(
  em: EntityManager,
  participantId: string,
  seen: number,
  { checkedOn }: ConfirmEligibilityBody,
): Promise<Participant> {
  return changeParticipant(
    em,
    participantId,
    seen,
    { kind: 'eligibility-confirmed' },
    async (participant, site) => {
      if (participant.state === 'screening') {
        throw stateForbids('Record the consent first: criteria are checked after it.');
      }
      if (participant.state !== 'consented') {
        throw stateForbids('What was allocated stays: eligibility is not changed any more.');
      }
      participant.eligibleOn = dayAt(site, checkedOn, '/checkedOn');
    },
  );
}

/** Records a withdrawal with its reason: collection stops at once, earlier data go as the participant chose (CP-03). */
export async function withdrawParticipant(
  em: EntityManager,
  participantId: string,
  seen: number,
  { reason, withdrawnOn, earlierData, safetyFollowUp }: WithdrawParticipantBody,
): Promise<Participant> {
  const about = { kind: 'participant-withdrawn', reason };
  return changeParticipant(em, participantId, seen, about, async (participant, site) => {
    if (participant.state === 'withdrawn') throw stateForbids('This participant has withdrawn already.');
    participant.withdrawnOn = dayAt(site, withdrawnOn, '/withdrawnOn', participant.enrolledOn);
    participant.earlierData = earlierData;
    participant.safetyFollowUp = safetyFollowUp;
    participant.state = 'withdrawn';
  });
}

async function changeParticipant(
  em: EntityManager,
  participantId: string,
  seen: number,
  about: { kind: string; reason?: string },
  change: (participant: Participant, site: Site) => Promise<void>,
): Promise<Participant> {
  const known = await readableParticipant(em, participantId);
  return act(em, { ...about, subject: aboutParticipant(known) }, async (tx) => {
    await assertStudyOpen(tx);
    const lock = { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true } as const;
    const participant = await tx.findOneOrFail(ParticipantSchema, participantId, lock);
    assertRevision(participant, seen);
    authorize('update', 'Participant', participant);
    await change(participant, await tx.findOneOrFail(SiteSchema, participant.siteId));
    return participant;
  });
}
