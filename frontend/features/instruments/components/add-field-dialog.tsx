import { useId, useState } from 'react';
import { units } from '#schemas/vocabulary/units.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { CheckboxField, SelectField, TextField } from '#frontend/components/fields.tsx';
import { fieldKinds, withField, type FieldKind } from '../model/edit-fields.ts';

interface AddFieldDialogProps {
  text: string;
  /** The new text, and where the field stands in it. */
  onAdded: (text: string, pointer: string) => void;
  onClose: () => void;
}

/** Adds a field of a usual kind; everything else about it is written in the schema. */
export function AddFieldDialog({ text, onAdded, onClose }: AddFieldDialogProps) {
  const list = useId();
  const [label, setLabel] = useState('');
  const [kind, setKind] = useState<FieldKind>('number');
  const [unit, setUnit] = useState('');
  const [required, setRequired] = useState(false);
  const measured = kind === 'number' || kind === 'readings';

  const handleAct = async () => {
    if (label.trim() === '') throw new Error('Give the field a label.');
    if (measured && unit.trim() === '') throw new Error('Give the unit, or 1 for a plain number.');
    const added = withField(text, { label, kind, unit: unit.trim(), required });
    onAdded(added.text, `/properties/${added.name}`);
  };

  return (
    <ActDialog
      title="Add a field"
      act="Add the field"
      reasons={false}
      consequences={
        <p>It is written at the end of the form; limits, checks and the rest follow in the schema.</p>
      }
      onAct={handleAct}
      onClose={onClose}
    >
      <TextField
        label="Label"
        required
        maxLength={80}
        value={label}
        onChange={(event) => setLabel(event.target.value)}
      />
      <SelectField
        label="Kind"
        choices={Object.entries(fieldKinds).map(([value, words]) => ({ value, label: words }))}
        value={kind}
        onChange={(event) => setKind(event.target.value as FieldKind)}
      />
      {measured && (
        <>
          <TextField
            label="Unit"
            help="UCUM code, such as mm[Hg] or mL/min/dL; 1 for a plain number."
            required
            list={list}
            spellCheck={false}
            autoComplete="off"
            value={unit}
            onChange={(event) => setUnit(event.target.value)}
          />
          <datalist id={list}>
            {units.map(({ code, name }) => (
              <option key={code} value={code}>
                {name}
              </option>
            ))}
          </datalist>
        </>
      )}
      <CheckboxField
        label="An entry cannot be completed without it"
        checked={required}
        onChange={(event) => setRequired(event.target.checked)}
      />
    </ActDialog>
  );
}
