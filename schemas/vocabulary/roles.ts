/** The roles a membership can give, in the order they are shown. */
export const roles = [
  'principal-investigator',
  'coordinator',
  'unblinded-technician',
  'study-physician',
  'statistician',
  'monitor',
  'administrator',
] as const;
export type Role = (typeof roles)[number];

/** Roles whose work is done knowing the allocation (`architecture.md` 5). */
export const unblindedByWork: readonly Role[] = ['unblinded-technician', 'study-physician'];
/** Roles that may be appointed unblinded; all others stay blinded until unblinding. */
export const unblindedByAppointment: readonly Role[] = ['monitor', 'statistician'];
/** Roles that can be limited to sites. */
export const limitedToSites: readonly Role[] = ['coordinator', 'unblinded-technician', 'monitor'];

/** The role's name as people read it. */
export const roleNames: Record<Role, string> = {
  'principal-investigator': 'principal investigator',
  coordinator: 'coordinator',
  'unblinded-technician': 'unblinded technician',
  'study-physician': 'study physician',
  statistician: 'statistician',
  monitor: 'monitor',
  administrator: 'administrator',
};
