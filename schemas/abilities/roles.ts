import type { Role } from '../vocabulary/roles.ts';
import type { AppRule, MembershipFacts } from './rule.ts';

/**
 * Who may do what: the table of the product description, one function a role, read aloud.
 * Conditions use equality and `$in`, `$ne` alone, because the same rules become the database's row filter.
 */
export function rulesOfRole(member: MembershipFacts): AppRule[] {
  return rulesByRole[member.role](member);
}

interface Scope {
  [column: string]: unknown;
}

const inStudy = ({ studyId }: MembershipFacts): Scope => ({ studyId });

const atOwnSites = ({ studyId, siteIds }: MembershipFacts): Scope =>
  siteIds === null ? { studyId } : { studyId, siteId: { $in: [...siteIds] } };

/** Rows whose content would tell the condition are for unblinded members only. */
const asFarAsBlinded = (scope: Scope, { unblinded }: MembershipFacts): Scope =>
  unblinded ? scope : { ...scope, level: 'open' };

const can = (action: AppRule['action'], subject: AppRule['subject'], conditions?: Scope): AppRule =>
  (conditions === undefined ? { action, subject } : { action, subject, conditions }) as AppRule;

/** Everyone in a study may read how it is set up. */
const readsSetUp = (member: MembershipFacts): AppRule[] => [
  can('read', 'Study', { id: member.studyId }),
  can('read', ['Site', 'ProtocolVersion', 'InstrumentVersion', 'StudyLock'], inStudy(member)),
];

const principalInvestigator = (member: MembershipFacts): AppRule[] => {
  const study = inStudy(member);
  return [
    ...readsSetUp(member),
    can('read', ['Membership', 'Participant', 'Visit', 'Entry', 'VerificationMark', 'Signature'], study),
    can(['read', 'create', 'update', 'publish'], ['ProtocolDraft', 'InstrumentDraft'], study),
    can('open', 'DirectIdentifiers', study),
    can('read', ['AllocationList', 'Unblinding'], study),
    can('unblind', 'Study', { id: member.studyId }),
    can('sign', 'Visit', { ...study, state: 'completed' }),
    can(['read', 'create'], ['Deviation'], asFarAsBlinded(study, member)),
    can('read', 'SourceDocument', asFarAsBlinded(study, member)),
    can(['read', 'ask', 'reply', 'settle'], 'Query', asFarAsBlinded(study, member)),
    can('open', 'Study', { id: member.studyId }),
    can('lock', 'Study', { id: member.studyId }),
    can('read', ['PlanVersion', 'Cut', 'Run', 'ExportRequest'], study),
    can('countersign', 'PlanVersion', study),
    can('decide', 'ExportRequest', { ...study, requestedById: { $ne: member.personId } }),
    can(['read', 'extract'], 'AuditEvent', study),
  ];
};

const coordinator = (member: MembershipFacts): AppRule[] => {
  const own = atOwnSites(member);
  const ownSteps = { ...own, performedBy: 'coordinator' };
  return [
    ...readsSetUp(member),
    can(['read', 'create', 'update'], 'Participant', own),
    can(['read', 'create', 'update'], 'DirectIdentifiers', own),
    can('read', 'AllocationList', inStudy(member)),
    can('assign', 'Participant', own),
    can(['read', 'create', 'update', 'complete'], 'Visit', own),
    can('read', 'Entry', own),
    can(['create', 'update', 'complete', 'correct', 'void'], 'Entry', ownSteps),
    can(['read', 'create'], 'Deviation', asFarAsBlinded(own, member)),
    can(['read', 'upload'], 'SourceDocument', asFarAsBlinded(own, member)),
    can('read', ['VerificationMark', 'Signature'], own),
    can('read', 'Query', asFarAsBlinded(own, member)),
    can('reply', 'Query', { ...asFarAsBlinded(own, member), performedBy: 'coordinator' }),
  ];
};

const unblindedTechnician = (member: MembershipFacts): AppRule[] => {
  const own = atOwnSites(member);
  const ownSteps = { ...own, performedBy: 'unblinded-technician' };
  return [
    ...readsSetUp(member),
    can('read', ['Participant', 'Visit', 'Entry', 'VerificationMark', 'Signature'], own),
    can(['create', 'update', 'complete', 'correct', 'void'], 'Entry', ownSteps),
    can('update', 'Visit', own),
    can('seal', 'AllocationList', inStudy(member)),
    can('read', 'AllocationList', inStudy(member)),
    can('read', 'AllocationSlot', own),
    can('assign', 'Participant', own),
    can(['read', 'create'], 'Deviation', own),
    can(['read', 'upload'], 'SourceDocument', own),
    can('read', 'Query', own),
    can('reply', 'Query', ownSteps),
  ];
};

const studyPhysician = (member: MembershipFacts): AppRule[] => {
  const study = inStudy(member);
  return [
    ...readsSetUp(member),
    can(
      'read',
      ['Participant', 'DirectIdentifiers', 'Visit', 'Entry', 'VerificationMark', 'Signature'],
      study,
    ),
    can(['create', 'update', 'complete', 'correct', 'void'], 'Entry', {
      ...study,
      performedBy: 'study-physician',
    }),
    can('read', ['AllocationList', 'Unblinding'], study),
    can('open', 'AllocationSlot', study),
    can(['read', 'create'], 'Deviation', study),
    can('read', ['SourceDocument', 'Query'], study),
    can('reply', 'Query', { ...study, performedBy: 'study-physician' }),
  ];
};

const statistician = (member: MembershipFacts): AppRule[] => {
  const study = inStudy(member);
  return [
    ...readsSetUp(member),
    can(
      'read',
      ['PlanDraft', 'PlanVersion', 'Cut', 'Run', 'ExportRequest', 'AllocationList', 'Unblinding'],
      study,
    ),
    can(['create', 'update', 'sign'], 'PlanDraft', study),
    can('request', 'Cut', study),
    can('run', ['PlanVersion', 'PlanDraft'], study),
    can('request', 'ExportRequest', study),
    can('download', 'ExportRequest', { ...study, requestedById: member.personId }),
    can('read', 'AuditEvent', { ...study, area: 'analysis' }),
    can('unblind', 'Study', { id: member.studyId }),
  ];
};

const monitor = (member: MembershipFacts): AppRule[] => {
  const own = atOwnSites(member);
  return [
    ...readsSetUp(member),
    can('read', ['Participant', 'DirectIdentifiers', 'Visit', 'Entry', 'VerificationMark', 'Signature'], own),
    can('read', ['AllocationList', 'Unblinding', 'PlanVersion', 'Cut', 'Run'], inStudy(member)),
    can('read', 'Deviation', asFarAsBlinded(own, member)),
    can('read', 'SourceDocument', asFarAsBlinded(own, member)),
    can('verify', 'Entry', { ...own, state: 'complete' }),
    can(['read', 'ask', 'settle'], 'Query', asFarAsBlinded(own, member)),
    can(['read', 'extract'], 'AuditEvent', own),
  ];
};

const administrator = (_member: MembershipFacts): AppRule[] => [
  can(['read', 'create', 'update', 'administer'], ['Study', 'Site', 'Person', 'Membership']),
  can('read', 'AuditEvent', { area: 'system' }),
];

const rulesByRole: Record<Role, (member: MembershipFacts) => AppRule[]> = {
  'principal-investigator': principalInvestigator,
  coordinator,
  'unblinded-technician': unblindedTechnician,
  'study-physician': studyPhysician,
  statistician,
  monitor,
  administrator,
};
