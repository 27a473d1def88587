import type { Deps } from '#backend/http/deps.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { declareDraftRoutes } from './draft.routes.ts';
import { declareInstrumentRoutes } from './instrument.routes.ts';

export { evaluateEntry } from './checking/evaluate-entry.ts';
export { instrumentLibrary } from './checking/instrument-library.ts';
export { startDraft } from './draft.service.ts';
export { draftText } from './draft-text.ts';
export { publishDraft } from './publish.service.ts';
export { publishedInstrument, type PublishedInstrument } from './published-instrument.ts';
export { newestInstruments } from './newest-instruments.ts';
export { jsonProblems, placedProblem } from './text-problems.ts';

/** Routes of instruments: the drafting table, published versions, the browser's validators. */
export function declareInstrumentsRoutes(table: RouteTable, deps: Deps): void {
  declareInstrumentRoutes(table, deps);
  declareDraftRoutes(table, deps);
}
