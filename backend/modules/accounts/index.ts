import type { Deps } from '#backend/http/deps.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { declareInvitationRoutes } from './invitation.routes.ts';
import { declareMembershipRoutes } from './membership.routes.ts';
import { declarePeopleRoutes } from './people.routes.ts';
import { declareSessionRoutes } from './session.routes.ts';

export { confirmPassword } from './confirm-password.ts';
export { demoAccounts } from './demo-accounts.ts';
export { grantMembership } from './membership.service.ts';
export { hashPassword } from './password.ts';
export { createPerson, inviteFirstAdministrator } from './people.service.ts';
export { asSystem } from './person-actor.ts';

/** Routes of accounts: sessions, people, memberships, invitations. */
export function declareAccountRoutes(table: RouteTable, deps: Deps): void {
  declareSessionRoutes(table, deps);
  declareInvitationRoutes(table, deps);
  declarePeopleRoutes(table, deps);
  declareMembershipRoutes(table, deps);
}
