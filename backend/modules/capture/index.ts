import type { Deps } from '#backend/http/deps.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { declareEntryRoutes } from './entry.routes.ts';
import { declareVisitRoutes } from './visit.routes.ts';

export { entryValues, storedValues, type StoredValue } from './entry-values.ts';
export { completeEntry } from './close-entry.ts';
export { openLogEntry, openStepEntry } from './open-entry.ts';
export { correctEntry, saveEntry } from './save-entry.ts';
export { onCapture } from './hooks.ts';
export { loadEntry, type LoadedEntry } from './load-entry.ts';
export { visitMeasures, type StepValues, type VisitMeasure } from './measures.ts';
export { mayKnow, presentValue } from './present-value.ts';
export { protocolOf, stepOf, visitTypeNamed, visitTypeOf } from './run-sheet.ts';
export { listVisits, presentVisits } from './visit-list.ts';
export { dayAt } from './visit.presenter.ts';
export {
  beginVisit,
  completeVisit,
  loadVisit,
  missVisit,
  noteDeviation,
  planVisit,
  rescheduleVisit,
  stampStep,
} from './visit.service.ts';

/** Routes of capture: visits, run sheets, entries. */
export function declareCaptureRoutes(table: RouteTable, deps: Deps): void {
  declareVisitRoutes(table, deps);
  declareEntryRoutes(table, deps);
}
