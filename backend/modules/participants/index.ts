import type { Deps } from '#backend/http/deps.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { declareAllocationRoutes } from './allocation.routes.ts';
import { declareIdentifiersRoutes } from './identifiers.routes.ts';
import { declareParticipantRoutes } from './participant.routes.ts';
import { declareUnblindingRoutes } from './unblinding.routes.ts';

export { assignAllocation } from './assign-allocation.ts';
export { enrolParticipant } from './enrol-participant.ts';
export { confirmEligibility } from './participant.service.ts';
export { sealAllocation } from './seal-allocation.ts';
export { confirmUnblinding, requestUnblinding } from './unblinding.service.ts';
export { recordCompletion } from './completion.ts';
export { conditionOf } from './conditions.ts';
export { assertConsented, recordConsent } from './consent.ts';

/** Routes of participants, their identifiers, the allocation and its blinding. */
export function declareParticipantsRoutes(table: RouteTable, deps: Deps): void {
  declareParticipantRoutes(table, deps);
  declareIdentifiersRoutes(table, deps);
  declareAllocationRoutes(table, deps);
  declareUnblindingRoutes(table, deps);
}
