import { describe, expect, it } from 'vitest';
import { conflictWithOthers, membershipProblems } from './membership-rules.ts';

const sites = ['a', 'b'];
const plain = { siteIds: null, unblinded: false } as const;

describe('a membership by itself', () => {
  // proves AC-01
  it('is limited to sites only in roles that can be, and only to sites of the study', () => {
    expect(membershipProblems({ ...plain, role: 'coordinator', siteIds: ['a'] }, sites)).toEqual([]);
    expect(membershipProblems({ ...plain, role: 'statistician', siteIds: ['a'] }, sites)).toEqual([
      { pointer: '/siteIds', detail: 'A statistician works at all sites; leave this empty.' },
    ]);
    expect(membershipProblems({ ...plain, role: 'monitor', siteIds: ['a', 'z'] }, sites)).toEqual([
      { pointer: '/siteIds/1', detail: 'This is not a site of the study.' },
    ]);
  });

  it('is unblinded by work, by appointment, or not at all', () => {
    const pointers = (role: Parameters<typeof membershipProblems>[0]['role'], unblinded: boolean) =>
      membershipProblems({ role, siteIds: null, unblinded }, sites).map(({ pointer }) => pointer);
    for (const role of ['unblinded-technician', 'study-physician'] as const) {
      expect(pointers(role, true)).toEqual([]);
      expect(pointers(role, false)).toEqual(['/unblinded']);
    }
    for (const role of ['monitor', 'statistician'] as const) {
      expect(pointers(role, true)).toEqual([]);
      expect(pointers(role, false)).toEqual([]);
    }
    for (const role of ['principal-investigator', 'coordinator'] as const) {
      expect(pointers(role, true)).toEqual(['/unblinded']);
    }
  });
});

describe('a membership beside others of the same person and study', () => {
  const blindedMonitor = { role: 'monitor', unblinded: false, status: 'active' } as const;
  const physician = { role: 'study-physician', unblinded: true, status: 'active' } as const;

  it('stands beside one of the same blinding and another role', () => {
    expect(conflictWithOthers({ ...plain, role: 'coordinator' }, [blindedMonitor])).toBeNull();
    expect(conflictWithOthers({ ...plain, role: 'monitor' }, [blindedMonitor])).toContain('already');
  });

  // proves RB-04
  it('is never blinded beside an unblinded one, nor the other way round', () => {
    expect(conflictWithOthers({ ...plain, role: 'coordinator' }, [physician])).toContain('nobody is both');
    expect(
      conflictWithOthers({ role: 'study-physician', siteIds: null, unblinded: true }, [blindedMonitor]),
    ).toContain('nobody is both');
  });

  it('does not make blind again who was unblinded once', () => {
    const former = { ...physician, status: 'revoked' } as const;
    expect(conflictWithOthers({ ...plain, role: 'coordinator' }, [former])).toContain('stays known');
    expect(conflictWithOthers({ ...plain, role: 'monitor', unblinded: true }, [former])).toBeNull();
    expect(
      conflictWithOthers({ ...plain, role: 'monitor' }, [{ ...blindedMonitor, status: 'revoked' }]),
    ).toBeNull();
  });
});
