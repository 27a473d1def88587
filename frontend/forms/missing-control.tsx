import { useState } from 'react';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import { missingReasonLabel } from '#schemas/vocabulary/missing-reasons.ts';
import { classNames } from '../components/class-names.ts';
import { useFieldState, useForm } from './form-context.ts';

/**
 * "Not done: why" for a field: a missing value is said, with a reason, and never looks like zero or no (DE-06). Where nothing
 * is required the control waits until the field is in hand.
 */
export function MissingControl({ field, required }: { field: CompiledField; required: boolean }) {
  const { store, readOnly } = useForm();
  const { value, draft, missing } = useFieldState(field.pointer);
  const [open, setOpen] = useState(false);
  if (readOnly || missing !== undefined || value !== undefined || (draft ?? '') !== '') return null;
  if (!open) {
    return (
      <button
        type="button"
        data-print="hide"
        aria-label={`${field.label}: not done`}
        className={classNames(
          'min-h-6 shrink-0 text-sm whitespace-nowrap text-ink-soft hover:text-venous hover:underline',
          !required && 'opacity-0 group-focus-within/field:opacity-100 group-hover/field:opacity-100',
        )}
        onClick={() => setOpen(true)}
      >
        not done?
      </button>
    );
  }
  return (
    <select
      // The person asked for it with the button in whose place it stands.
      // eslint-disable-next-line jsx-a11y/no-autofocus
      autoFocus
      aria-label={`${field.label}: why it was not done`}
      defaultValue=""
      className="rounded border border-edge bg-paper px-2 py-0.5 text-sm text-ink"
      onBlur={() => setOpen(false)}
      onChange={(event) => {
        setOpen(false);
        if (event.target.value !== '') store.change({ pointer: field.pointer, missing: event.target.value });
      }}
    >
      <option value="">not done: why?</option>
      {field.missingReasons.map((reason) => (
        <option key={reason} value={reason}>
          {missingReasonLabel(reason)}
        </option>
      ))}
    </select>
  );
}

/** In place of the value: the reason why there is none, and the way back. */
export function MissingValue({ field, reason }: { field: CompiledField; reason: string }) {
  const { store, readOnly } = useForm();
  return (
    <p className="flex min-h-9 flex-wrap items-center gap-3 rounded border border-dashed border-edge px-3 py-1">
      <span>
        Not done: <strong className="font-medium">{missingReasonLabel(reason)}</strong>
      </span>
      {!readOnly && (
        <button
          type="button"
          data-print="hide"
          className="min-h-6 text-sm link"
          onClick={() => store.change({ pointer: field.pointer, value: null })}
        >
          It was done
        </button>
      )}
    </p>
  );
}
