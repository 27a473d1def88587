import type { EntityManager } from '@mikro-orm/postgresql';
import { createHmac, timingSafeEqual } from 'node:crypto';
import type { SignaturePreparationDto, SignatureDto, SignVisitBody } from '#schemas/api/records.ts';
import { act } from '#backend/database/act.ts';
import { canonicalHash } from '#backend/database/trail/canonical.ts';
import { currentActor, currentPersonId } from '#backend/http/actor.ts';
import { authorize } from '#backend/http/authorize.ts';
import { Problem, stateForbids } from '#backend/http/problem.ts';
import { confirmPassword } from '../accounts/index.ts';
import { loadVisit } from '../capture/index.ts';
import { VisitSchema, type Visit } from '../capture/visit.entity.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { SignatureSchema, type Signature, type SignedContent } from './records.entity.ts';
import { changedSince, coveredBy } from './signed-content.ts';

const meaning = 'I have reviewed this visit and take responsibility for what is recorded in it.';
const withoutHidden = ' Values hidden until unblinding were not shown to me.';

/** Minutes within which what was shown must be signed (ES-07). */
const shownFor = 5 * 60_000;

async function contentOf(em: EntityManager, visit: Visit): Promise<SignedContent> {
  return { covered: await coveredBy(em, visit), withoutUnblindingValues: !currentActor().unblinded };
}

/** Proves that this content was shown to this person at this time; kept by the browser, made by us. */
function preparationOf(secret: string, visitId: string, contentHash: string, at: number): string {
  const seal = createHmac('sha256', secret)
    .update(`${visitId} ${contentHash} ${currentPersonId()} ${at}`)
    .digest('hex');
  return `${at}.${seal}`;
}

/** What the signer will sign, built by the server (ES-06). */
export async function prepareSignature(
  em: EntityManager,
  secret: string,
  visitId: string,
): Promise<SignaturePreparationDto> {
  const visit = await loadVisit(em, visitId);
  authorize('sign', 'Visit', visit, 'Only a completed visit is signed, by the principal investigator.');
  const content = await contentOf(em, visit);
  const contentHash = canonicalHash(content);
  return {
    visitId,
    meaning: meaning + (content.withoutUnblindingValues ? withoutHidden : ''),
    ...content,
    contentHash,
    preparation: preparationOf(secret, visitId, contentHash, Date.now()),
  };
}

function assertShown(secret: string, visitId: string, { contentHash, preparation }: SignVisitBody): void {
  const at = Number(preparation.split('.')[0]);
  const expected = Buffer.from(preparationOf(secret, visitId, contentHash, at));
  const given = Buffer.from(preparation);
  const genuine = given.length === expected.length && timingSafeEqual(given, expected);
  if (!genuine || !(Date.now() - at < shownFor)) {
    throw new Problem(412, 'stale-revision', 'What was shown to you is too old to sign; look at it again.');
  }
}

/** Signs a completed visit with the password; refused when anything changed since it was shown. */
export async function signVisit(
  em: EntityManager,
  secret: string,
  visitId: string,
  body: SignVisitBody,
): Promise<Signature> {
  const visit = await loadVisit(em, visitId);
  authorize('sign', 'Visit', visit, 'Only a completed visit is signed, by the principal investigator.');
  assertShown(secret, visitId, body);
  const person = await confirmPassword(em, currentPersonId(), body.password);
  return act(
    em,
    {
      kind: 'visit-signed',
      subject: { type: 'visit', id: visitId, participantId: visit.participantId, siteId: visit.siteId },
    },
    async (tx) => {
      await assertStudyOpen(tx);
      // The visit's row is held, so that the same request sent twice signs once (ES-07).
      await tx.execute('select id from visit where id = ? for update', [visitId]);
      const content = await contentOf(tx, await tx.findOneOrFail(VisitSchema, visitId));
      const contentHash = canonicalHash(content);
      if (contentHash !== body.contentHash) {
        throw new Problem(
          412,
          'stale-revision',
          'The visit changed since it was shown to you; look at it again.',
        );
      }
      const known = await tx.findOne(SignatureSchema, {
        subjectType: 'visit',
        subjectId: visitId,
        contentHash,
        signerId: person.id,
      });
      if (known !== null) throw stateForbids('You have signed exactly this already.');
      return tx.create(SignatureSchema, {
        studyId: visit.studyId,
        subjectType: 'visit',
        subjectId: visitId,
        meaning: meaning + (content.withoutUnblindingValues ? withoutHidden : ''),
        signerId: person.id,
        signerName: person.name,
        role: currentActor().role,
        signedAt: new Date(),
        content,
        contentHash,
      });
    },
  );
}

/** The signatures of a visit, each with whether it still covers what lies there (ES-08). */
export async function signaturesOf(em: EntityManager, visit: Visit): Promise<SignatureDto[]> {
  const rows = await em.find(
    SignatureSchema,
    { studyId: visit.studyId, subjectType: 'visit', subjectId: visit.id },
    { orderBy: { signedAt: 'desc' } },
  );
  const present = rows.length === 0 ? [] : await coveredBy(em, visit);
  return rows.map((row) => {
    // A row that was moved or edited no longer fits its own hash (ES-02).
    const own = canonicalHash(row.content) === row.contentHash;
    const changed = own ? changedSince(row.content.covered, present) : ['the signature itself'];
    return {
      id: row.id,
      signerName: row.signerName,
      role: row.role,
      signedAt: row.signedAt.toISOString(),
      meaning: row.meaning,
      contentHash: row.contentHash,
      state: changed.length === 0 ? 'covers' : 'changed',
      changed,
    };
  });
}
