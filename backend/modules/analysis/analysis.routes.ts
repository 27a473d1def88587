import {
  requestCutBody,
  requestRunBody,
  savePlanBody,
  signPlanBody,
  type RequestCutBody,
  type RequestRunBody,
  type SavePlanBody,
  type SignPlanBody,
} from '#schemas/api/analysis.ts';
import { emptyBody } from '#schemas/api/capture.ts';
import { act } from '#backend/database/act.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { assertReadable } from '#backend/http/authorize.ts';
import type { Deps } from '#backend/http/deps.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { notFound } from '#backend/http/problem.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { requestCancel } from '#backend/jobs/progress.ts';
import { CutSchema, PlanDraftSchema, PlanVersionSchema, RunSchema, type Run } from './analysis.entity.ts';
import {
  presentCuts,
  presentPlans,
  presentProgress,
  presentRuns,
  presentVersions,
} from './analysis.presenter.ts';
import { requestCut } from './cut.service.ts';
import { draftPlan, loadPlanDraft, savePlan, signPlan } from './plan.service.ts';
import { readResult, requestRun } from './run.service.ts';

const study = '/studies/:studyCode';
const anyObject = { type: 'object' } as const;
const list = { type: 'array', items: anyObject } as const;

/** Plans, cuts and runs. */
export function declareAnalysisRoutes({ route }: RouteTable, { orm: { em }, objectStore }: Deps): void {
  route({
    method: 'get',
    path: `${study}/plans`,
    summary: 'The plans being written, each with what keeps it from being signed',
    gate: ['read', 'PlanDraft'],
    responds: { status: 200, body: list },
    acts: null,
    handler: async (_request, response) => {
      const drafts = await em.find(
        PlanDraftSchema,
        { studyId: currentStudyId() },
        { orderBy: { name: 'asc' } },
      );
      response.json(await presentPlans(em, drafts));
    },
  });

  route({
    method: 'get',
    path: `${study}/plan-versions`,
    summary: 'The signed plans',
    gate: ['read', 'PlanVersion'],
    responds: { status: 200, body: list },
    acts: null,
    handler: async (_request, response) => {
      const rows = await em.find(
        PlanVersionSchema,
        { studyId: currentStudyId() },
        { orderBy: { signedAt: 'desc' } },
      );
      response.json(await presentVersions(em, rows));
    },
  });

  route({
    method: 'post',
    path: `${study}/plans`,
    summary: 'Begin a plan',
    gate: ['create', 'PlanDraft'],
    body: savePlanBody,
    responds: { status: 201, body: anyObject },
    acts: ['plan-drafted'],
    handler: async (request, response) => {
      const draft = await draftPlan(em, request.body as SavePlanBody);
      response
        .status(201)
        .set('ETag', etag(draft.revision))
        .json((await presentPlans(em, [draft]))[0]);
    },
  });

  route({
    method: 'get',
    path: `${study}/plans/:planId`,
    summary: 'One plan',
    gate: ['read', 'PlanDraft'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (request, response) => {
      const draft = await loadPlanDraft(em, idParameter(request, 'planId'));
      response.set('ETag', etag(draft.revision)).json((await presentPlans(em, [draft]))[0]);
    },
  });

  route({
    method: 'put',
    path: `${study}/plans/:planId`,
    summary: 'Save a plan; it need not be complete yet',
    gate: ['update', 'PlanDraft'],
    body: savePlanBody,
    responds: { status: 200, body: anyObject },
    acts: ['plan-drafted'],
    handler: async (request, response) => {
      const draft = await savePlan(
        em,
        idParameter(request, 'planId'),
        ifMatch(request),
        request.body as SavePlanBody,
      );
      response.set('ETag', etag(draft.revision)).json((await presentPlans(em, [draft]))[0]);
    },
  });

  route({
    method: 'post',
    path: `${study}/plans/:planId/signature`,
    summary: 'Sign a plan with the password',
    gate: ['sign', 'PlanDraft'],
    body: signPlanBody,
    responds: { status: 201, body: anyObject },
    acts: ['plan-signed', 'signature-refused'],
    handler: async (request, response) => {
      const { password } = request.body as SignPlanBody;
      const version = await signPlan(em, idParameter(request, 'planId'), ifMatch(request), password);
      response.status(201).json((await presentVersions(em, [version]))[0]);
    },
  });

  route({
    method: 'get',
    path: `${study}/cuts`,
    summary: 'The cuts of the study',
    gate: ['read', 'Cut'],
    responds: { status: 200, body: list },
    acts: null,
    handler: async (_request, response) => {
      const cuts = await em.find(CutSchema, { studyId: currentStudyId() }, { orderBy: { number: 'desc' } });
      response.json(await presentCuts(em, cuts));
    },
  });

  route({
    method: 'post',
    path: `${study}/cuts`,
    summary: 'Ask for a cut; a worker makes it',
    gate: ['request', 'Cut'],
    body: requestCutBody,
    responds: { status: 202, body: anyObject },
    acts: ['cut-requested'],
    handler: async (request, response) => {
      const jobKey = await requestCut(em, (request.body as RequestCutBody).kind);
      response.status(202).json({ jobKey });
    },
  });

  route({
    method: 'get',
    path: `${study}/jobs/:jobKey`,
    summary: 'How far a cut or run is',
    gate: ['read', 'Cut'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (request, response) => {
      const progress = await presentProgress(em, idParameter(request, 'jobKey'));
      if (progress === null) throw notFound('This piece of work');
      response.json(progress);
    },
  });

  route({
    method: 'post',
    path: `${study}/jobs/:jobKey/cancellation`,
    summary: 'Stop a cut or run at its next step',
    gate: ['request', 'Cut'],
    body: emptyBody,
    responds: { status: 202, body: anyObject },
    acts: ['job-cancelled'],
    handler: async (request, response) => {
      const jobKey = idParameter(request, 'jobKey');
      if ((await presentProgress(em, jobKey)) === null) throw notFound('This piece of work');
      await act(em, { kind: 'job-cancelled', subject: { type: 'job', id: jobKey } }, (tx) =>
        requestCancel(tx, jobKey),
      );
      response.status(202).json(await presentProgress(em, jobKey));
    },
  });

  route({
    method: 'get',
    path: `${study}/runs`,
    summary: 'Every run, none is ever removed',
    gate: ['read', 'Run'],
    responds: { status: 200, body: list },
    acts: null,
    handler: async (_request, response) => {
      const runs = await em.find(RunSchema, { studyId: currentStudyId() }, { orderBy: { number: 'desc' } });
      response.json(await presentRuns(em, runs));
    },
  });

  route({
    method: 'post',
    path: `${study}/runs`,
    summary: 'Carry out a plan on a cut',
    gate: ['run', 'PlanVersion'],
    body: requestRunBody,
    responds: { status: 202, body: anyObject },
    acts: ['run-requested'],
    handler: async (request, response) => {
      const run = await requestRun(em, request.body as RequestRunBody);
      response.status(202).json((await presentRuns(em.fork(), [run]))[0]);
    },
  });

  const loadRun = async (id: string): Promise<Run> => {
    const run = await em.findOne(RunSchema, { studyId: currentStudyId(), id });
    assertReadable('Run', run, 'This run');
    return run as Run;
  };

  route({
    method: 'get',
    path: `${study}/runs/:runId`,
    summary: 'One run: plan, cut, version, seed, progress',
    gate: ['read', 'Run'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (request, response) => {
      response.json((await presentRuns(em, [await loadRun(idParameter(request, 'runId'))]))[0]);
    },
  });

  route({
    method: 'get',
    path: `${study}/runs/:runId/result`,
    summary: 'The result of a run, as its stored bytes',
    gate: ['read', 'Run'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (request, response) => {
      const run = await loadRun(idParameter(request, 'runId'));
      response.type('application/json').send(await readResult(objectStore, run));
    },
  });
}
