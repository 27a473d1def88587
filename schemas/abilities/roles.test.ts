import { subject as asSubject } from '@casl/ability';
import { describe, expect, it } from 'vitest';
import { roles, type Role } from '../vocabulary/roles.ts';
import { abilityFor } from './ability.ts';
import { rulesOfRole } from './roles.ts';
import { actions, subjectNames, type Action, type MembershipFacts, type SubjectName } from './rule.ts';

const member = (role: Role): MembershipFacts => ({
  personId: 'person',
  studyId: role === 'administrator' ? null : 'study',
  role,
  siteIds: null,
  unblinded: false,
});

const whatMay = (role: Role): string[] =>
  subjectNames.flatMap((subject) =>
    actions
      .filter((action) => abilityFor(member(role)).can(action, subject))
      .map((action) => `${action} ${subject}`),
  );

describe('the rules of the roles', () => {
  it('name each action: the words by which the library means every action or every subject are not used', () => {
    for (const role of roles) {
      const named = rulesOfRole(member(role)).flatMap(({ action, subject }) => [action, subject].flat());
      expect(named).not.toContain('manage');
      expect(named).not.toContain('all');
    }
  });

  it('let the administrator keep accounts and studies, and neither lock, open nor unblind one', () => {
    expect(whatMay('administrator')).toEqual([
      ...(['Study', 'Site', 'Person', 'Membership'] satisfies SubjectName[]).flatMap((subject) =>
        (['read', 'create', 'update', 'administer'] satisfies Action[]).map(
          (action) => `${action} ${subject}`,
        ),
      ),
      'read AuditEvent',
    ]);
  });

  it('show the administrator the system’s trail, and no study’s', () => {
    const ability = abilityFor(member('administrator'));
    const event = (area: string) => asSubject('AuditEvent', { area }) as never;
    expect(ability.can('read', event('system'))).toBe(true);
    expect(ability.can('read', event('study'))).toBe(false);
  });

  it('give lock and unblind to the few of the product description', () => {
    const who = (action: Action, subject: SubjectName) =>
      roles.filter((role) => abilityFor(member(role)).can(action, subject));
    expect(who('lock', 'Study')).toEqual(['principal-investigator']);
    expect(who('administer', 'Person')).toEqual(['administrator']);
    expect(who('unblind', 'Study')).not.toContain('administrator');
  });
});
