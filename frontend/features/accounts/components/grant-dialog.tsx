import { useState } from 'react';
import type { PersonDto } from '#schemas/api/people.ts';
import type { StudyDto } from '#schemas/api/studies.ts';
import { roleNames, roles, type Role } from '#schemas/vocabulary/roles.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { SelectField } from '#frontend/components/fields.tsx';
import { useRefusals } from '#frontend/lib/use-refusals.ts';
import { usePeopleActs } from '../api/people.ts';
import { blindingOf } from '../model/membership-words.ts';
import { BlindingField } from './blinding-field.tsx';
import { SitesField } from './sites-field.tsx';

interface GrantDialogProps {
  person: PersonDto;
  studies: readonly StudyDto[];
  onGranted: () => void;
  onClose: () => void;
}

/** Gives a person a role in a study, or makes an administrator. */
export function GrantDialog({ person, studies, onGranted, onClose }: GrantDialogProps) {
  const { grant } = usePeopleActs();
  const [role, setRole] = useState<Role | ''>('');
  const [studyCode, setStudyCode] = useState('');
  const [siteIds, setSiteIds] = useState<string[] | null>(null);
  const [unblinded, setUnblinded] = useState(false);
  const [tried, setTried] = useState(false);
  const [refused, run] = useRefusals();
  const inStudy = role !== 'administrator';
  const study = studies.find(({ code }) => code === studyCode);

  const handleAct = async ({ reason }: { reason: string }) => {
    setTried(true);
    if (role === '' || (inStudy && study === undefined))
      throw new Error('Choose the role and the study, below.');
    const wanted = {
      personId: person.id,
      studyCode: inStudy ? studyCode : null,
      role,
      siteIds: inStudy ? siteIds : null,
      unblinded: blindingOf(role) ?? unblinded,
      reason,
    };
    await run(() => grant(wanted));
    onGranted();
  };

  return (
    <ActDialog
      title={`A role for ${person.name}`}
      act="Grant the membership"
      reasons={['joins the team', 'takes over from a colleague', 'delegated by the principal investigator']}
      consequences={
        <p>
          It holds from the person’s next click, stands in the study’s audit trail, and the person is told by
          e-mail. Nobody is blinded and unblinded in one study, and administrators hold no role in a study.
        </p>
      }
      onAct={handleAct}
      onClose={onClose}
    >
      <SelectField
        label="Role"
        required
        placeholder="Choose the role"
        choices={roles.map((value) => ({ value, label: roleNames[value] }))}
        value={role}
        onChange={(event) => {
          setRole(event.target.value as Role | '');
          setSiteIds(null);
        }}
        error={tried && role === '' ? 'Choose the role.' : undefined}
      />
      {role !== '' && inStudy && (
        <SelectField
          label="Study"
          required
          placeholder="Choose the study"
          choices={studies.map(({ code, name }) => ({ value: code, label: name }))}
          value={studyCode}
          onChange={(event) => {
            setStudyCode(event.target.value);
            setSiteIds(null);
          }}
          error={refused['/studyCode'] ?? (tried && study === undefined ? 'Choose the study.' : undefined)}
        />
      )}
      {role !== '' && inStudy && study && (
        <>
          <SitesField
            role={role}
            sites={study.sites}
            siteIds={siteIds}
            onChange={setSiteIds}
            error={tried && siteIds?.length === 0 ? 'Choose at least one site.' : refused['/siteIds']}
          />
          <BlindingField
            role={role}
            unblinded={unblinded}
            onChange={setUnblinded}
            error={refused['/unblinded']}
          />
        </>
      )}
    </ActDialog>
  );
}
