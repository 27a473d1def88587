import type { Deps } from './http/deps.ts';
import type { RouteTable } from './http/route.ts';
import { declareAccountRoutes } from './modules/accounts/index.ts';
import { declareAnalysisRoutes } from './modules/analysis/index.ts';
import { declareCaptureRoutes } from './modules/capture/index.ts';
import { declareStudiesRoutes } from './modules/studies/index.ts';

/** Every module declares its routes here, in the order of their nouns. */
export function declareRoutes(table: RouteTable, deps: Deps): void {
  declareAccountRoutes(table, deps);
  declareStudiesRoutes(table, deps);
  declareCaptureRoutes(table, deps);
  declareAnalysisRoutes(table, deps);
}
