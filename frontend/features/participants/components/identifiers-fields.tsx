import { TextField } from '#frontend/components/fields.tsx';
import type { IdentifiersDraft } from '../model/identifiers-form.ts';

interface IdentifiersFieldsProps {
  draft: IdentifiersDraft;
  onChange: (draft: IdentifiersDraft) => void;
  problemOf: (field: keyof IdentifiersDraft) => string | undefined;
}

const fields = [
  { field: 'name', label: 'Full name', required: true },
  {
    field: 'birthDate',
    label: 'Birth date',
    required: true,
    help: 'Year, month, day: 1980-02-29',
    inputMode: 'numeric',
  },
  { field: 'phone', label: 'Phone', type: 'tel' },
  { field: 'email', label: 'E-mail', type: 'email' },
  { field: 'postcode', label: 'Postcode' },
  {
    field: 'recordNumber',
    label: 'Record number',
    help: 'The number of the patient record, where there is one',
  },
] as const;

/** The fields of direct identifiers. The browser is asked not to remember them (WS-13). */
export function IdentifiersFields({ draft, onChange, problemOf }: IdentifiersFieldsProps) {
  return (
    <div className="grid gap-4 sm:grid-cols-2">
      {fields.map(({ field, ...look }) => (
        <TextField
          key={field}
          {...look}
          autoComplete="off"
          spellCheck={false}
          value={draft[field]}
          onChange={(event) => onChange({ ...draft, [field]: event.target.value })}
          error={problemOf(field)}
        />
      ))}
    </div>
  );
}
