import { useId } from 'react';
import type { Role } from '#schemas/vocabulary/roles.ts';
import { RadioField } from '#frontend/components/fields.tsx';
import { blindingOf } from '../model/membership-words.ts';

interface BlindingFieldProps {
  role: Role;
  unblinded: boolean;
  onChange: (unblinded: boolean) => void;
  error?: string | undefined;
}

/** Blinded or unblinded, where a person decides; in words, where the role does. */
export function BlindingField({ role, unblinded, onChange, error }: BlindingFieldProps) {
  const name = useId();
  const given = blindingOf(role);
  if (given !== null) {
    return (
      <p className="text-sm">
        {given
          ? 'This role is unblinded by its work: it sees the allocation and what reveals it.'
          : 'This role stays blinded until the study is unblinded.'}
      </p>
    );
  }
  return (
    <RadioField
      name={name}
      label="Blinding"
      required
      choices={[
        { value: 'no', label: 'blinded', help: 'Sees nothing that would reveal the condition.' },
        {
          value: 'yes',
          label: 'unblinded, by appointment',
          help: 'Sees values that reveal it. Cannot be blinded in this study again.',
        },
      ]}
      value={unblinded ? 'yes' : 'no'}
      onChange={(value) => onChange(value === 'yes')}
      error={error}
    />
  );
}
