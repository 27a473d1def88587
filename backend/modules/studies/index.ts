import type { Deps } from '#backend/http/deps.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { declareStudyRoutes } from './study.routes.ts';

export { assertStudyOpen } from './study-open.ts';
export { addSite, createStudy } from './study.service.ts';

/** Routes of studies and their sites. */
export function declareStudiesRoutes(table: RouteTable, deps: Deps): void {
  declareStudyRoutes(table, deps);
}
