import type { EntityManager } from '@mikro-orm/postgresql';
import type { CutDto, PlanDto, PlanVersionDto, ProgressDto, RunDto } from '#schemas/api/analysis.ts';
import { readProgress } from '#backend/jobs/progress.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import {
  CutSchema,
  PlanDraftSchema,
  PlanVersionSchema,
  type Cut,
  type PlanDraft,
  type PlanVersion,
  type Run,
} from './analysis.entity.ts';
import { planProblems } from './plan.service.ts';

async function namesOf(em: EntityManager, ids: string[]): Promise<Map<string, string>> {
  const people = await em.find(PersonSchema, { id: { $in: [...new Set(ids)] } });
  return new Map(people.map(({ id, name }) => [id, name]));
}

const presentVersion = (row: PlanVersion, names: ReadonlyMap<string, string>): PlanVersionDto => ({
  id: row.id,
  version: row.version,
  name: row.name,
  hash: row.hash,
  signedBy: names.get(row.authorId) ?? '',
  signedAt: row.signedAt.toISOString(),
  studyStateThen: row.studyStateThen,
});

export async function presentPlans(em: EntityManager, drafts: readonly PlanDraft[]): Promise<PlanDto[]> {
  const versions = await em.find(
    PlanVersionSchema,
    { draftId: { $in: drafts.map(({ id }) => id) } },
    { orderBy: { version: 'desc' } },
  );
  const names = await namesOf(
    em,
    [...drafts, ...versions].map(({ authorId }) => authorId),
  );
  return drafts.map((draft) => ({
    id: draft.id,
    name: draft.name,
    revision: draft.revision,
    content: draft.content,
    problems: planProblems(draft.content),
    author: names.get(draft.authorId) ?? '',
    versions: versions.filter(({ draftId }) => draftId === draft.id).map((row) => presentVersion(row, names)),
  }));
}

/** The signed plans alone, for those who read but do not write them. */
export async function presentVersions(em: EntityManager, rows: readonly PlanVersion[]) {
  const names = await namesOf(
    em,
    rows.map(({ authorId }) => authorId),
  );
  return rows.map((row) => ({ ...presentVersion(row, names), content: row.content }));
}

export async function presentCuts(em: EntityManager, cuts: readonly Cut[]): Promise<CutDto[]> {
  const names = await namesOf(
    em,
    cuts.map(({ madeById }) => madeById),
  );
  return cuts.map((cut) => ({
    id: cut.id,
    number: cut.number,
    kind: cut.kind,
    studyStateThen: cut.studyStateThen,
    sha256: cut.sha256,
    madeBy: names.get(cut.madeById) ?? '',
    madeAt: cut.madeAt.toISOString(),
    manifest: cut.manifest,
  }));
}

export async function presentProgress(em: EntityManager, jobKey: string): Promise<ProgressDto | null> {
  const progress = await readProgress(em, jobKey);
  if (progress === null) return null;
  const { state, done, total, detail } = progress;
  return { jobKey, state, done, total, detail };
}

export async function presentRuns(em: EntityManager, runs: readonly Run[]): Promise<RunDto[]> {
  const cuts = await em.find(CutSchema, { id: { $in: runs.map(({ cutId }) => cutId) } });
  const versions = await em.find(PlanVersionSchema, {
    id: { $in: runs.flatMap((run) => run.planVersionId ?? []) },
  });
  const drafts = await em.find(PlanDraftSchema, {
    id: { $in: runs.flatMap((run) => run.planDraftId ?? []) },
  });
  const names = await namesOf(
    em,
    runs.map(({ requestedById }) => requestedById),
  );
  return Promise.all(
    runs.map(async (run): Promise<RunDto> => {
      const cut = cuts.find(({ id }) => id === run.cutId) as Cut;
      const version = versions.find(({ id }) => id === run.planVersionId);
      const draft = drafts.find(({ id }) => id === run.planDraftId);
      return {
        id: run.id,
        number: run.number,
        state: run.state,
        standing: standingOf(version, cut),
        plan: {
          name: version?.name ?? draft?.name ?? '',
          version: version?.version ?? null,
          hash: run.planHash,
          signedAt: version?.signedAt.toISOString() ?? null,
          content: version?.content ?? draft?.content ?? null,
        },
        cut: { id: cut.id, number: cut.number, kind: cut.kind, sha256: cut.sha256 },
        engineVersion: run.engineVersion,
        seed: run.seed,
        requestedBy: names.get(run.requestedById) ?? '',
        requestedAt: run.requestedAt.toISOString(),
        resultSha256: run.resultSha256 ?? null,
        failure: run.failure ?? null,
        progress: run.state === 'done' || run.state === 'failed' ? null : await presentProgress(em, run.id),
      };
    }),
  );
}

/** Planned means signed while the study was still running: before lock and unblinding (SR-01). */
function standingOf(version: PlanVersion | undefined, cut: Cut): RunDto['standing'] {
  if (cut.kind === 'rehearsal') return 'rehearsal';
  return version?.studyStateThen === 'running' ? 'planned' : 'post-hoc';
}
