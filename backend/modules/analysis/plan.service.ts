import type { EntityManager } from '@mikro-orm/postgresql';
import { checkStudyPlan, type PlanProblem } from '#analysis/study/check-study-plan.ts';
import { studyPlanSchema, type StudyPlan } from '#analysis/study/study-plan.ts';
import type { SavePlanBody } from '#schemas/api/analysis.ts';
import { act } from '#backend/database/act.ts';
import { canonicalHash } from '#backend/database/trail/canonical.ts';
import { currentActor, currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { Problem } from '#backend/http/problem.ts';
import { problemsOf } from '#backend/http/validate.ts';
import { confirmPassword } from '../accounts/index.ts';
import { SignatureSchema } from '../records/records.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { PlanDraftSchema, PlanVersionSchema, type PlanDraft, type PlanVersion } from './analysis.entity.ts';

/** Everything that keeps a content from being a plan: first its form, then what its members ask of each other. */
export function planProblems(content: unknown): PlanProblem[] {
  const form = problemsOf(studyPlanSchema, content).map(({ pointer, detail }) => ({
    pointer,
    message: detail,
  }));
  return form.length > 0 ? form : checkStudyPlan(content as StudyPlan);
}

export async function loadPlanDraft(em: EntityManager, id: string): Promise<PlanDraft> {
  const draft = await em.findOne(PlanDraftSchema, { studyId: currentStudyId(), id });
  assertReadable('PlanDraft', draft, 'This plan');
  return draft as PlanDraft;
}

/** Begins a plan; it need not be valid yet, nothing typed is lost. */
export async function draftPlan(em: EntityManager, { name, content }: SavePlanBody): Promise<PlanDraft> {
  const studyId = currentStudyId();
  authorize('create', 'PlanDraft', { studyId });
  return act(
    em,
    { kind: 'plan-drafted', subject: (row: PlanDraft) => ({ type: 'plan-draft', id: row.id }) },
    async (tx) =>
      tx.create(PlanDraftSchema, {
        studyId,
        name,
        content: content as StudyPlan,
        authorId: currentPersonId(),
      }),
  );
}

export async function savePlan(
  em: EntityManager,
  id: string,
  seen: number,
  body: SavePlanBody,
): Promise<PlanDraft> {
  const draft = await loadPlanDraft(em, id);
  assertRevision(draft, seen);
  authorize('update', 'PlanDraft', draft);
  return act(em, { kind: 'plan-drafted', subject: { type: 'plan-draft', id } }, async (tx) => {
    const row = await tx.findOneOrFail(PlanDraftSchema, id);
    row.name = body.name;
    row.content = body.content as StudyPlan;
    return row;
  });
}

/** Signs a plan with the password: an immutable version, bound to its hash and to the study's state then (SR-01). */
export async function signPlan(
  em: EntityManager,
  id: string,
  seen: number,
  password: string,
): Promise<PlanVersion> {
  const draft = await loadPlanDraft(em, id);
  assertRevision(draft, seen);
  authorize('sign', 'PlanDraft', draft);
  const problems = planProblems(draft.content);
  if (problems.length > 0) {
    throw new Problem(
      422,
      'plan-not-valid',
      'The plan is not complete yet; each point is named below.',
      problems.map(({ pointer, message }) => ({ pointer, detail: message })),
    );
  }
  await confirmPassword(em, currentPersonId(), password);
  const study = await em.findOneOrFail(StudySchema, draft.studyId);
  const { name: signerName, role } = currentActor();
  const hash = canonicalHash(draft.content);
  return act(
    em,
    { kind: 'plan-signed', subject: (row: PlanVersion) => ({ type: 'plan-version', id: row.id }) },
    async (tx) => {
      assertRevision(await tx.findOneOrFail(PlanDraftSchema, id), seen);
      const version = (await tx.count(PlanVersionSchema, { draftId: id })) + 1;
      const signedAt = new Date();
      const row = tx.create(PlanVersionSchema, {
        studyId: draft.studyId,
        draftId: id,
        version,
        name: draft.name,
        content: draft.content,
        hash,
        authorId: currentPersonId(),
        signedAt,
        studyStateThen: study.state,
      });
      await tx.flush();
      const content = {
        covered: [
          {
            type: 'plan-version',
            id: row.id,
            revision: version,
            hash,
            label: `${draft.name}, version ${version}`,
          },
        ],
        withoutUnblindingValues: !currentActor().unblinded,
      };
      tx.create(SignatureSchema, {
        studyId: draft.studyId,
        subjectType: 'plan-version',
        subjectId: row.id,
        meaning: 'I have written this plan and it is to be carried out as it stands.',
        signerId: currentPersonId(),
        signerName,
        role,
        signedAt,
        content,
        contentHash: canonicalHash(content),
      });
      return row;
    },
  );
}
