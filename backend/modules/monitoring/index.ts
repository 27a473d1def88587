import type { Deps } from '#backend/http/deps.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { followCaptureAndSource } from './falling-marks.ts';
import { declareMonitoringRoutes as declare } from './monitoring.routes.ts';

export { askQuery, replyToQuery, settleQuery } from './query.service.ts';
export { verificationOf, verify } from './verification.service.ts';

/** Routes of monitoring; from then on marks fall by themselves. */
export function declareMonitoringRoutes(table: RouteTable, deps: Deps): void {
  followCaptureAndSource();
  declare(table, deps);
}
