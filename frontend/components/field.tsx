import { useId, type ReactNode } from 'react';
import { readableUnit, spokenUnit } from '../lib/format/units.ts';
import { classNames } from './class-names.ts';

export interface FieldLook {
  label: string;
  /** UCUM code: shown in short beside the label, spoken in full. */
  unit?: string | undefined;
  help?: ReactNode;
  /** What is wrong and what to do. */
  error?: string | undefined;
  required?: boolean | undefined;
  /** The label is for screen readers only, where a table or a neighbour already shows it. */
  labelHidden?: boolean;
  className?: string | undefined;
}

interface Wiring {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
}

/** Label, control, help and error, tied together for assistive technology. */
export function Field({ children, ...field }: FieldLook & { children: (wiring: Wiring) => ReactNode }) {
  const id = useId();
  const { label, unit, help, error, required, labelHidden = false, className } = field;
  const describedBy = [help ? `${id}-help` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ');
  return (
    <div className={classNames('flex flex-col gap-1', className)}>
      <label htmlFor={id} className={labelHidden ? 'sr-only' : 'text-sm text-ink'}>
        <LabelText label={label} unit={unit} required={required} />
      </label>
      {children({
        id,
        'aria-describedby': describedBy || undefined,
        'aria-invalid': error ? true : undefined,
      })}
      {help && (
        <p id={`${id}-help`} className="text-sm text-ink-soft">
          {help}
        </p>
      )}
      {error && <FieldError id={`${id}-error`}>{error}</FieldError>}
    </div>
  );
}

/** "Systolic pressure mmHg" to the eye, "Systolic pressure, millimetres of mercury" to the ear. */
export function LabelText({ label, unit, required }: Pick<FieldLook, 'label' | 'unit' | 'required'>) {
  const readable = unit ? readableUnit(unit) : '';
  return (
    <>
      <span className="font-medium">{label}</span>
      {readable && (
        <>
          <span aria-hidden className="text-ink-soft">
            {' '}
            {readable}
          </span>
          <span className="sr-only">, {spokenUnit(unit!)}</span>
        </>
      )}
      {required && <span className="text-ink-soft"> · required</span>}
    </>
  );
}

/** An error in words at its field. */
export function FieldError({ id, children }: { id?: string; children: ReactNode }) {
  return (
    <p id={id} className="flex gap-1 text-sm font-medium text-arterial">
      <span aria-hidden>▲</span>
      {children}
    </p>
  );
}

/** The look of everything one types into. */
export const controlLook =
  'w-full rounded border border-edge bg-paper px-3 py-1.5 text-ink [&:is(input,textarea):read-only]:bg-bone disabled:bg-bone disabled:text-ink-soft aria-invalid:border-2 aria-invalid:border-arterial';
