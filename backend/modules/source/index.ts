export { declareSourceRoutes } from './source.routes.ts';
export { onSourceReplaced, uploadSource } from './source.service.ts';
