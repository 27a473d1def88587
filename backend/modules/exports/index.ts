export { declareExportRoutes } from './export.routes.ts';
export { decideExport, exportJob, requestExport } from './export.service.ts';
