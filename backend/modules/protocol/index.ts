import type { Deps } from '#backend/http/deps.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { declareProtocolDraftRoutes } from './protocol-draft.routes.ts';
import { declareProtocolVersionRoutes } from './protocol.routes.ts';

export { startEnrolment } from './enrolment.service.ts';
export { publishProtocol, saveProtocolDraft, startProtocolDraft } from './protocol-draft.service.ts';

/** Routes of the protocol and of opening the study for enrolment. */
export function declareProtocolRoutes(table: RouteTable, deps: Deps): void {
  declareProtocolVersionRoutes(table, deps);
  declareProtocolDraftRoutes(table, deps);
}
