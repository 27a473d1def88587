import {
  useId,
  type InputHTMLAttributes,
  type ReactNode,
  type SelectHTMLAttributes,
  type TextareaHTMLAttributes,
} from 'react';
import { classNames } from './class-names.ts';
import { controlLook, Field, FieldError, LabelText, type FieldLook } from './field.tsx';

/** One line of text. Numbers too, as text, so that the digits stay as written. */
export function TextField(
  props: FieldLook & Omit<InputHTMLAttributes<HTMLInputElement>, keyof FieldLook | 'id'>,
) {
  const [field, rest] = split(props);
  return (
    <Field {...field}>
      {(wiring) => (
        <input type="text" {...rest} {...wiring} required={field.required} className={controlLook} />
      )}
    </Field>
  );
}

export function TextareaField(
  props: FieldLook & Omit<TextareaHTMLAttributes<HTMLTextAreaElement>, keyof FieldLook | 'id'>,
) {
  const [field, rest] = split(props);
  return (
    <Field {...field}>
      {(wiring) => (
        <textarea rows={3} {...rest} {...wiring} required={field.required} className={controlLook} />
      )}
    </Field>
  );
}

interface Choice {
  value: string;
  label: string;
  help?: string;
}

type SelectProps = FieldLook &
  Omit<SelectHTMLAttributes<HTMLSelectElement>, keyof FieldLook | 'id'> & {
    choices: readonly Choice[];
    /** Shown while nothing is chosen. */
    placeholder?: string;
  };

export function SelectField({ choices, placeholder, ...props }: SelectProps) {
  const [field, rest] = split(props);
  return (
    <Field {...field}>
      {(wiring) => (
        <select
          {...rest}
          {...wiring}
          required={field.required}
          className={classNames(controlLook, 'min-h-8.5')}
        >
          {placeholder !== undefined && <option value="">{placeholder}</option>}
          {choices.map(({ value, label }) => (
            <option key={value} value={value}>
              {label}
            </option>
          ))}
        </select>
      )}
    </Field>
  );
}

type CheckboxProps = Omit<FieldLook, 'unit' | 'labelHidden'> &
  Omit<InputHTMLAttributes<HTMLInputElement>, keyof FieldLook | 'id' | 'type'>;

export function CheckboxField({ label, help, error, required, className, ...rest }: CheckboxProps) {
  const id = useId();
  const describedBy = [help ? `${id}-help` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ');
  return (
    <div className={className}>
      <label htmlFor={id} className="flex min-h-6 items-start gap-2">
        <input
          type="checkbox"
          {...rest}
          id={id}
          required={required}
          aria-describedby={describedBy || undefined}
          aria-invalid={error ? true : undefined}
          className="mt-0.5 size-4.5 shrink-0 accent-venous"
        />
        <span>{label}</span>
      </label>
      {help && (
        <p id={`${id}-help`} className="ml-6.5 text-sm text-ink-soft">
          {help}
        </p>
      )}
      {error && <FieldError id={`${id}-error`}>{error}</FieldError>}
    </div>
  );
}

interface RadioProps extends FieldLook {
  name: string;
  choices: readonly Choice[];
  value?: string;
  defaultValue?: string;
  onChange?: (value: string) => void;
  children?: ReactNode;
}

/** One of a few, all seen at once. `children` follow the choices, for "own words". */
export function RadioField({ name, choices, value, defaultValue, onChange, children, ...field }: RadioProps) {
  const id = useId();
  const { label, unit, help, error, required, className } = field;
  return (
    <fieldset
      className={classNames('flex flex-col gap-1', className)}
      aria-describedby={
        [help ? `${id}-help` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ') || undefined
      }
    >
      <legend className="mb-1 text-sm">
        <LabelText label={label} unit={unit} required={required} />
      </legend>
      {choices.map((choice) => (
        <label key={choice.value} className="flex min-h-6 items-start gap-2">
          <input
            type="radio"
            name={name}
            value={choice.value}
            required={required}
            className="mt-0.5 size-4.5 shrink-0 accent-venous"
            {...(value === undefined ? {} : { checked: value === choice.value })}
            {...(defaultValue === undefined ? {} : { defaultChecked: defaultValue === choice.value })}
            onChange={() => onChange?.(choice.value)}
          />
          <span>
            {choice.label}
            {choice.help && <span className="block text-sm text-ink-soft">{choice.help}</span>}
          </span>
        </label>
      ))}
      {children}
      {help && (
        <p id={`${id}-help`} className="text-sm text-ink-soft">
          {help}
        </p>
      )}
      {error && <FieldError id={`${id}-error`}>{error}</FieldError>}
    </fieldset>
  );
}

function split<Props extends FieldLook>(props: Props): [FieldLook, Omit<Props, keyof FieldLook>] {
  const { label, unit, help, error, required, labelHidden, className, ...rest } = props;
  return [{ label, unit, help, error, required, labelHidden: labelHidden ?? false, className }, rest];
}
