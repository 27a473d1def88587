import type { EntityManager } from '@mikro-orm/postgresql';
import { act } from '#backend/database/act.ts';
import { currentPersonId } from '#backend/http/actor.ts';
import { authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { Problem, stateForbids, type FieldProblem } from '#backend/http/problem.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { makeValidatorCode } from './checking/checking.pool.ts';
import { draftText } from './draft-text.ts';
import { readDraft } from './draft.service.ts';
import {
  InstrumentDraftSchema,
  InstrumentVersionSchema,
  type InstrumentVersion,
} from './instrument.entity.ts';
import { judgeDraft, type Judgement } from './judge-draft.ts';

/**
 * Publishes a draft as the next version, which never changes again (IV-01): checked, every sample as expected,
 * and the browser's validator made. The draft then lies on the table unchanged, as the version.
 * @throws Problem 422 `instrument-not-valid` naming each point that stands against it
 */
export async function publishDraft(
  em: EntityManager,
  draftId: string,
  seenRevision: number,
  { reason }: { reason: string },
): Promise<InstrumentVersion> {
  const seen = await readDraft(em, draftId);
  assertRevision(seen, seenRevision);
  authorize('publish', 'InstrumentDraft', seen);
  // Judged and compiled before the act, on the revision that is asked for again inside: locks stay short.
  const judgement = await judgeDraft(em, seen);
  const { schema, hash } = assertPublishable(judgement);
  const newest = judgement.published.at(-1);
  if (
    newest !== undefined &&
    seen.text === draftText(newest.schema) &&
    sameJson(seen.samples, newest.samples)
  ) {
    throw stateForbids(`Nothing differs from version ${newest.version}; there is nothing to publish.`);
  }
  const validatorCode = await makeValidatorCode(schema);
  const kind = { kind: 'instrument-published', reason, subject: aboutVersion };
  return act(em, kind, async (tx) => {
    await assertStudyOpen(tx);
    const draft = await tx.findOneOrFail(InstrumentDraftSchema, draftId, { refresh: true });
    assertRevision(draft, seenRevision);
    const version = (newest?.version ?? 0) + 1;
    draft.baseVersion = version;
    draft.text = draftText(schema);
    return tx.create(InstrumentVersionSchema, {
      studyId: draft.studyId,
      key: draft.key,
      version,
      title: schema.title,
      schema,
      samples: seen.samples,
      hash,
      validatorCode,
      reason,
      authorId: currentPersonId(),
      publishedAt: new Date(),
    });
  });
}

const aboutVersion = ({ id }: InstrumentVersion) => ({ type: 'instrument-version', id });

const sameJson = (one: unknown, other: unknown): boolean => JSON.stringify(one) === JSON.stringify(other);

function assertPublishable({ publishable, problems, samples, instrument }: Judgement) {
  if (publishable && instrument !== null) return instrument;
  const errors: FieldProblem[] = problems
    .filter(({ severity }) => severity === 'error')
    .map(({ pointer, message, line }) => ({ pointer, detail: `Line ${line}: ${message}` }));
  for (const [index, sample] of samples.entries()) {
    if (!sample.passed) {
      errors.push({
        pointer: `/samples/${index}`,
        detail: `${sample.name}: ${sample.differences.join('; ')}`,
      });
    }
  }
  if (errors.length === 0) {
    errors.push({
      pointer: '/samples',
      detail: 'Try the instrument first: keep at least one sample that comes out as expected.',
    });
  }
  throw new Problem(
    422,
    'instrument-not-valid',
    'This draft cannot be published yet; each point is named below.',
    errors,
  );
}
