/** Where a role begins. */
export function homeOf(acting: { studyCode: string | null } | null): string {
  if (!acting) return '/choose';
  return acting.studyCode === null ? '/administration' : `/studies/${acting.studyCode}/now`;
}
