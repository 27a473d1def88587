import type { KeyboardEvent } from 'react';
import { classNames } from '../components/class-names.ts';
import { controlLook } from '../components/field.tsx';
import { useFieldState, useFindings, useForm } from './form-context.ts';
import type { FieldState } from './form-store.ts';

interface DraftInputProps {
  id: string;
  address: string;
  /** Only where no visible label names it, as in a grid. */
  label?: string;
  numeric?: boolean;
  multiline?: boolean;
  readOnly?: boolean;
  className?: string;
}

/**
 * One text field of an instrument. What is typed stays text, digits and all; it becomes a value on leaving the field
 * or on Enter. Only this field is drawn anew while typing.
 */
export function DraftInput({
  id,
  address,
  label,
  numeric = false,
  multiline = false,
  readOnly = false,
  className,
}: DraftInputProps) {
  const form = useForm();
  const state = useFieldState(address);
  const findings = useFindings(address);
  const invalid = state.problem !== undefined || findings.some(({ severity }) => severity === 'hard');
  const shared = {
    id,
    'aria-label': label,
    'aria-invalid': invalid || undefined,
    'aria-describedby': `${id}/help ${id}/error`,
    readOnly: form.readOnly || readOnly,
    value: textOf(state),
    autoComplete: 'off',
    className: classNames(controlLook, className),
    onChange: (event: { target: { value: string } }) => form.store.type(address, event.target.value),
    onBlur: () => form.store.commit(address),
    onKeyDown: (event: KeyboardEvent) => {
      if (event.key === 'Enter' && !multiline) form.store.commit(address);
      if (event.key === 'Escape' && state.draft !== undefined) form.store.dropDraft(address);
    },
  };
  if (multiline) return <textarea rows={3} {...shared} />;
  return <input type="text" inputMode={numeric ? 'decimal' : undefined} spellCheck={!numeric} {...shared} />;
}

/** The text in the field: what is being typed, else the digits as written, else the value. */
function textOf({ draft, written, value }: FieldState): string {
  return draft ?? written ?? (value === undefined ? '' : String(value));
}
