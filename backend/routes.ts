import type { Deps } from './http/deps.ts';
import type { RouteTable } from './http/route.ts';
import { declareAccountRoutes } from './modules/accounts/index.ts';
import { declareAnalysisRoutes } from './modules/analysis/index.ts';
import { declareCaptureRoutes } from './modules/capture/index.ts';
import { declareExportRoutes } from './modules/exports/index.ts';
import { declareInstrumentsRoutes } from './modules/instruments/index.ts';
import { declareOverviewRoutes } from './modules/overview/index.ts';
import { declareParticipantsRoutes } from './modules/participants/index.ts';
import { declareMonitoringRoutes } from './modules/monitoring/index.ts';
import { declareProtocolRoutes } from './modules/protocol/index.ts';
import { declareRecordRoutes } from './modules/records/index.ts';
import { declareSourceRoutes } from './modules/source/index.ts';
import { declareStudiesRoutes } from './modules/studies/index.ts';

/** Every module declares its routes here, in the order of their nouns. */
export function declareRoutes(table: RouteTable, deps: Deps): void {
  declareAccountRoutes(table, deps);
  declareStudiesRoutes(table, deps);
  declareInstrumentsRoutes(table, deps);
  declareProtocolRoutes(table, deps);
  declareParticipantsRoutes(table, deps);
  declareCaptureRoutes(table, deps);
  declareSourceRoutes(table, deps);
  declareMonitoringRoutes(table, deps);
  declareRecordRoutes(table, deps);
  declareAnalysisRoutes(table, deps);
  declareExportRoutes(table, deps);
  declareOverviewRoutes(table, deps);
}
