export { declareAnalysisRoutes } from './analysis.routes.ts';
export { readCut, type CutEntry, type CutHead, type CutLine, type CutVisit } from './cut-file.ts';
export { cutJob, requestCut } from './cut.service.ts';
export { draftPlan, signPlan } from './plan.service.ts';
export { readResult, requestRun, runJob } from './run.service.ts';
export { presentProgress } from './analysis.presenter.ts';
export { systemActor } from './system-actor.ts';
export { verifiedBytes } from './verified-bytes.ts';
