import {
  limitedToSites,
  roleNames,
  unblindedByAppointment,
  unblindedByWork,
} from '#schemas/vocabulary/roles.ts';
import type { Role } from '#schemas/vocabulary/roles.ts';
import type { FieldProblem } from '#backend/http/problem.ts';

/** What is to be granted, as far as the rules ask. */
export interface WantedMembership {
  role: Role;
  siteIds: readonly string[] | null;
  unblinded: boolean;
}

/** A membership the person holds, or held, in the same study. */
export interface OtherMembership {
  role: Role;
  unblinded: boolean;
  status: 'active' | 'revoked';
}

/** What is wrong with a membership by itself, whoever gets it; empty when it may be. */
export function membershipProblems(
  wanted: WantedMembership,
  siteIdsOfStudy: readonly string[],
): FieldProblem[] {
  const { role, siteIds, unblinded } = wanted;
  const found: FieldProblem[] = [];
  if (siteIds !== null && !limitedToSites.includes(role)) {
    found.push({ pointer: '/siteIds', detail: `${aRole(role)} works at all sites; leave this empty.` });
  }
  for (const [index, siteId] of (siteIds ?? []).entries()) {
    if (!siteIdsOfStudy.includes(siteId)) {
      found.push({ pointer: `/siteIds/${index}`, detail: 'This is not a site of the study.' });
    }
  }
  if (unblindedByWork.includes(role) && !unblinded) {
    found.push({ pointer: '/unblinded', detail: `${aRole(role)} is unblinded by the work itself.` });
  }
  if (unblinded && !unblindedByWork.includes(role) && !unblindedByAppointment.includes(role)) {
    found.push({ pointer: '/unblinded', detail: `${aRole(role)} stays blinded until unblinding.` });
  }
  return found;
}

/**
 * Why this person cannot hold it beside the others of the same study; null when nothing stands against it.
 * Nobody is blinded and unblinded in one study, and who has been unblinded is not blinded again: what was seen
 * stays known after the membership ends.
 */
export function conflictWithOthers(
  { role, unblinded }: WantedMembership,
  others: readonly OtherMembership[],
): string | null {
  const active = others.filter(({ status }) => status === 'active');
  if (active.some((other) => other.role === role)) return `This person is ${roleNames[role]} here already.`;
  if (active.some((other) => other.unblinded !== unblinded)) {
    return `This person is ${unblinded ? 'blinded' : 'unblinded'} in this study by another membership; nobody is both.`;
  }
  if (!unblinded && others.some((other) => other.unblinded)) {
    return 'This person was unblinded in this study before, and what was seen stays known: no blinded role is possible.';
  }
  return null;
}

const aRole = (role: Role): string => `${/^[aeiou]/.test(role) ? 'An' : 'A'} ${roleNames[role]}`;
