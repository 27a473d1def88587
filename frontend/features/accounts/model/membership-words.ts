import type { HeldMembershipDto, PersonDto } from '#schemas/api/people.ts';
import { roleNames, unblindedByAppointment, unblindedByWork, type Role } from '#schemas/vocabulary/roles.ts';
import type { PenState } from '#frontend/components/pen-mark.tsx';

/** How a person's state is drawn and said. */
export const personMarks: Record<PersonDto['status'], { state: PenState; word: string }> = {
  invited: { state: 'todo', word: 'invited, not accepted yet' },
  active: { state: 'settled', word: 'active' },
  deactivated: { state: 'late', word: 'deactivated' },
};

export const membershipMarks: Record<HeldMembershipDto['status'], { state: PenState; word: string }> = {
  active: { state: 'settled', word: 'active' },
  revoked: { state: 'late', word: 'revoked' },
};

/** `all sites`, or their codes. */
export const sitesInWords = ({ siteCodes }: Pick<HeldMembershipDto, 'siteCodes'>): string =>
  siteCodes === null ? 'all sites' : siteCodes.join(', ');

/** `monitor in MARSH · sites AA · unblinded` */
export function membershipInWords(membership: HeldMembershipDto): string {
  const { role, studyName, siteCodes, unblinded } = membership;
  if (studyName === null) return roleNames[role];
  return [
    `${roleNames[role]} in ${studyName}`,
    ...(siteCodes === null ? [] : [`sites ${siteCodes.join(', ')}`]),
    ...(unblinded ? ['unblinded'] : []),
  ].join(' · ');
}

/** Whether the role decides about blinding by itself, and how; `null` where it is a person's appointment. */
export function blindingOf(role: Role): boolean | null {
  if (unblindedByWork.includes(role)) return true;
  return unblindedByAppointment.includes(role) ? null : false;
}
