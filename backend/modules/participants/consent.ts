import { LockMode, type EntityManager } from '@mikro-orm/postgresql';
import type { ParticipantState } from '#schemas/vocabulary/states.ts';
import { notFound, stateForbids } from '#backend/http/problem.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { ParticipantSchema, type Participant } from './participant.entity.ts';
import { todayAt } from './today-at.ts';

/**
 * Puts a participant's consent on record, inside the act that completes the consent entry; consenting again on a
 * newer version replaces date and version and leaves the state.
 *
 * @param consent date `YYYY-MM-DD` at the site, and the version of the consent text
 * @throws Problem 409 for a date to come, an empty or too long version, or after withdrawal
 */
export async function recordConsent(
  tx: EntityManager,
  participantId: string,
  { date, version }: { date: string; version: string },
): Promise<Participant> {
  const participant = await tx.findOne(ParticipantSchema, participantId, {
    lockMode: LockMode.PESSIMISTIC_WRITE,
    refresh: true,
  });
  if (participant === null) throw notFound('This participant');
  if (participant.state === 'withdrawn') throw withdrawn(participant.withdrawnOn);
  const site = await tx.findOneOrFail(SiteSchema, participant.siteId);
  if (date > todayAt(site.timeZone))
    throw stateForbids('The consent is dated in the future; correct its date.');
  const named = version.trim();
  if (named === '' || named.length > 40) {
    throw stateForbids('Name the version of the consent text in at most 40 characters.');
  }
  participant.consentedOn = date;
  participant.consentVersion = named;
  if (participant.state === 'screening') participant.state = 'consented';
  return participant;
}

/**
 * Before anything is taken from a participant: the consent is on record, and was not withdrawn (CP-01, CP-03).
 * Holds until the act commits: a withdrawal waits for it.
 *
 * @param safetyFollowUp for adverse events, which a withdrawal may leave open
 * @throws Problem 409
 */
export async function assertConsented(
  tx: EntityManager,
  participantId: string,
  { safetyFollowUp = false }: { safetyFollowUp?: boolean } = {},
): Promise<void> {
  const [row] = await tx.execute<
    { state: ParticipantState; withdrawn_on: string | null; safety_follow_up: boolean | null }[]
  >('select state, withdrawn_on::text, safety_follow_up from participant where id = ? for share', [
    participantId,
  ]);
  if (row === undefined) throw notFound('This participant');
  if (row.state === 'screening') {
    throw stateForbids('Record the consent first: nothing is taken from a participant before it.');
  }
  if (row.state === 'withdrawn' && !(safetyFollowUp && row.safety_follow_up === true)) {
    throw withdrawn(row.withdrawn_on);
  }
}

const withdrawn = (on: string | null | undefined) =>
  stateForbids(`This participant withdrew on ${on ?? 'an unknown day'}; nothing more is collected.`);
