import { useState } from 'react';
import type { HeldMembershipDto } from '#schemas/api/people.ts';
import type { StudyDto } from '#schemas/api/studies.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { usePeopleActs } from '../api/people.ts';
import { blindingOf, membershipInWords } from '../model/membership-words.ts';
import { BlindingField } from './blinding-field.tsx';
import { SitesField } from './sites-field.tsx';

interface ChangeMembershipDialogProps {
  personName: string;
  membership: HeldMembershipDto;
  study: StudyDto | undefined;
  onChanged: () => void;
  onClose: () => void;
}

/** Other sites or another blinding; another role is another membership. */
export function ChangeMembershipDialog(props: ChangeMembershipDialogProps) {
  const { personName, membership, study, onChanged, onClose } = props;
  const { change } = usePeopleActs();
  const { role } = membership;
  const [siteIds, setSiteIds] = useState(membership.siteIds);
  const [unblinded, setUnblinded] = useState(membership.unblinded);
  return (
    <ActDialog
      title={`Change a membership of ${personName}`}
      act="Change the membership"
      reasons={['works at other sites now', 'appointed unblinded', 'was granted wrongly']}
      consequences={
        <p>
          Now: {membershipInWords(membership)}. The change holds from the person’s next click and stands in
          the audit trail.
        </p>
      }
      onAct={async ({ reason }) => {
        if (siteIds?.length === 0) throw new Error('Choose at least one site, or all of them.');
        await change(membership, { siteIds, unblinded: blindingOf(role) ?? unblinded, reason });
        onChanged();
      }}
      onClose={onClose}
    >
      <SitesField role={role} sites={study?.sites ?? []} siteIds={siteIds} onChange={setSiteIds} />
      <BlindingField role={role} unblinded={unblinded} onChange={setUnblinded} />
    </ActDialog>
  );
}
