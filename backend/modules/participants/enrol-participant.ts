import type { EntityManager } from '@mikro-orm/postgresql';
import { randomUUID } from 'node:crypto';
import { parseParticipantCode } from '#schemas/participants/participant-code.ts';
import { nextParticipantCode } from '#schemas/participants/telling-code.ts';
import type { EnrolParticipantBody } from '#schemas/api/participants.ts';
import type { IdentityKeys } from '#backend/config/settings.ts';
import { act } from '#backend/database/act.ts';
import { currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { seenBefore, type IdempotencyKey } from '#backend/http/idempotency.ts';
import { notFound, stateForbids } from '#backend/http/problem.ts';
import { ProtocolVersionSchema, type ProtocolVersion } from '../protocol/protocol.entity.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { SiteSchema, type Site } from '../studies/site.entity.ts';
import { AllocationListSchema } from './allocation.entity.ts';
import { alreadyEnrolled, assertNotEnrolled, isEnrolledTwice } from './already-enrolled.ts';
import { dayAt } from './day-at.ts';
import { DirectIdentifiersSchema } from './direct-identifiers.entity.ts';
import { assertPlausible, sealedIdentifiers } from './identifiers.ts';
import { ParticipantSchema, type Participant } from './participant.entity.ts';
import { readableParticipant } from './participant.queries.ts';
import { aboutParticipant } from './participant.service.ts';
import { keyedDigest } from './sealing.ts';

/** Enrols a person: code, screening and sealed identifiers in one act. Sent again with its key, it answers the same. */
export async function enrolParticipant(
  em: EntityManager,
  keys: IdentityKeys,
  body: EnrolParticipantBody,
  given: IdempotencyKey | null,
): Promise<Participant> {
  const site = await em.findOne(SiteSchema, { id: body.siteId, studyId: currentStudyId() });
  assertReadable('Site', site, 'This site');
  // The plain digest of a body with a name and a birth date could be guessed from a list of names.
  const key = given && { key: given.key, bodyHash: keyedDigest(keys, given.bodyHash) };
  if (await seenBefore(em, key)) return enrolledWith(em, key!);
  const about = { studyId: currentStudyId(), siteId: site!.id };
  authorize('create', 'Participant', about, 'You enrol participants at your own sites only.');
  authorize('create', 'DirectIdentifiers', about);
  assertPlausible(body.identifiers);
  const enrolledOn = dayAt(site!, body.enrolledOn, '/enrolledOn');
  try {
    return await act(
      em,
      { kind: 'participant-enrolled', subject: aboutParticipant, idempotency: key },
      (tx) => enrol(tx, keys, site!, { ...body, enrolledOn }),
    );
  } catch (error) {
    // The same request sent twice at once: whichever comes second finds the person, or the key, taken.
    if (await seenBefore(em, key)) return enrolledWith(em, key!);
    throw isEnrolledTwice(error) ? alreadyEnrolled(null) : error;
  }
}

async function enrol(
  tx: EntityManager,
  keys: IdentityKeys,
  site: Site,
  { identifiers, enrolledOn }: EnrolParticipantBody & { enrolledOn: string },
): Promise<Participant> {
  const protocol = await protocolToEnrolUnder(tx);
  const id = randomUUID();
  const sealed = sealedIdentifiers(keys, { id, studyId: site.studyId }, identifiers);
  await assertNotEnrolled(tx, site.studyId, sealed.blindIndex, id);
  const taken = await numbersTaken(tx, site);
  tx.create(DirectIdentifiersSchema, { participantId: id, studyId: site.studyId, ...sealed });
  return tx.create(ParticipantSchema, {
    id,
    studyId: site.studyId,
    siteId: site.id,
    code: nextParticipantCode(site.code, taken, identifiers),
    state: 'screening',
    enrolledOn,
    protocolVersionId: protocol.id,
  });
}

/** Enrolling begins when the study runs under a published protocol, and its allocation is sealed (RB-01). */
async function protocolToEnrolUnder(tx: EntityManager): Promise<ProtocolVersion> {
  const state = await assertStudyOpen(tx);
  if (state !== 'running')
    throw stateForbids('The study is being set up; participants are enrolled once it runs.');
  const studyId = currentStudyId();
  const protocol = await tx.findOne(ProtocolVersionSchema, { studyId }, { orderBy: { version: 'desc' } });
  if (protocol === null) throw stateForbids('Publish the protocol before the first participant is enrolled.');
  if (protocol.content.sequences.length > 1) {
    const sealed = await tx.count(AllocationListSchema, { studyId });
    if (sealed === 0) {
      throw stateForbids(
        'The unblinded technician must seal the allocation list before the first participant is enrolled.',
      );
    }
  }
  return protocol;
}

/** Takes the site's row, so that two enrolments cannot take one number, then reads the numbers in use. */
async function numbersTaken(tx: EntityManager, site: Site): Promise<Set<number>> {
  await tx.execute('select id from site where id = ? for no key update', [site.id]);
  const rows = await tx.execute<{ code: string }[]>('select code from participant where site_id = ?', [
    site.id,
  ]);
  return new Set(rows.map(({ code }) => parseParticipantCode(code)?.number ?? 0));
}

async function enrolledWith(em: EntityManager, { key }: IdempotencyKey): Promise<Participant> {
  const [row] = await em.execute<{ subject: string }[]>(
    `select event.subject from idempotency_key used
       join audit_event event on event.study_id = used.study_id and event.sequence = used.sequence
      where used.person_id = ? and used.key = ?`,
    [currentPersonId(), key],
  );
  if (row === undefined) throw notFound('This participant');
  return readableParticipant(em, row.subject.replace('participant/', ''));
}
