import { useState } from 'react';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import type { EntryValue } from '#schemas/instruments/entry-values.ts';
import { TextField } from '#frontend/components/fields.tsx';

type Expected = Readonly<Record<string, EntryValue | null>>;

interface ExpectedDerivedProps {
  derived: readonly CompiledField[];
  expected: Expected;
  onChange: (expected: Record<string, EntryValue | null>) => void;
}

/** What each derived field must come to, worked out by hand or from a publication; blank is not compared. */
export function ExpectedDerived({ derived, expected, onChange }: ExpectedDerivedProps) {
  if (derived.length === 0) return null;
  return (
    <details className="text-sm">
      <summary className="w-fit text-venous">Derived values it must come to</summary>
      <div className="mt-2 grid gap-3 sm:grid-cols-2 lg:grid-cols-3">
        {derived.map((field) => (
          <ExpectedValue
            key={field.pointer}
            field={field}
            value={expected[field.pointer]}
            onChange={(value) => {
              const { [field.pointer]: _before, ...rest } = expected;
              onChange(value === undefined ? rest : { ...rest, [field.pointer]: value });
            }}
          />
        ))}
      </div>
    </details>
  );
}

interface ExpectedValueProps {
  field: CompiledField;
  value: EntryValue | null | undefined;
  onChange: (value: EntryValue | null | undefined) => void;
}

function ExpectedValue({ field, value, onChange }: ExpectedValueProps) {
  const [text, setText] = useState(() => textOf(value));
  const numeric = field.type === 'number' || field.type === 'integer';
  const wrong = numeric && !['', 'none'].includes(text.trim()) && !Number.isFinite(Number(text));
  return (
    <TextField
      label={field.label}
      unit={field.unit}
      value={text}
      onChange={(event) => {
        const typed = event.target.value;
        setText(typed);
        onChange(valueOf(typed.trim(), numeric));
      }}
      error={wrong ? 'Write a number with a point, or "none" where no value may come out.' : undefined}
    />
  );
}

function textOf(value: EntryValue | null | undefined): string {
  if (value === undefined) return '';
  if (value === null) return 'none';
  return typeof value === 'object' ? JSON.stringify(value) : String(value);
}

function valueOf(text: string, numeric: boolean): EntryValue | null | undefined {
  if (text === '') return undefined;
  if (text === 'none') return null;
  if (!numeric) return text === 'true' ? true : text === 'false' ? false : text;
  const number = Number(text);
  return Number.isFinite(number) ? number : undefined;
}
