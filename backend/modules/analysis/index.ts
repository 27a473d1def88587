export { declareAnalysisRoutes } from './analysis.routes.ts';
export { readCut, type CutLine } from './cut-file.ts';
export { cutJob, requestCut } from './cut.service.ts';
export { draftPlan, signPlan } from './plan.service.ts';
export { readResult, requestRun, runJob } from './run.service.ts';
