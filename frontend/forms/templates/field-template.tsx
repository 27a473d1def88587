import type { FieldTemplateProps } from '@rjsf/utils';
import type { ReactNode } from 'react';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import { classNames } from '../../components/class-names.ts';
import { LabelText } from '../../components/field.tsx';
import { HiddenValue } from '../../components/pen-mark.tsx';
import { DraftProblem } from '../draft-problem.tsx';
import { FindingList } from '../finding-list.tsx';
import { useAddress, useFieldState, useForm } from '../form-context.ts';
import { isLong } from '../widgets/long-text.ts';
import { MissingControl, MissingValue } from '../missing-control.tsx';

/** Around every field: label with unit, the control, help, findings, and the reason when there is no value. */
export function FieldTemplate({ id, children, schema, required = false }: FieldTemplateProps) {
  const address = useAddress(id);
  const field = useForm().store.compiled.field(address);
  if (!field) return children;
  return (
    <FieldFrame id={id} field={field} required={required} wide={isWide(field, schema.maxLength)}>
      {children}
    </FieldFrame>
  );
}

interface FieldFrameProps {
  id: string;
  field: CompiledField;
  required: boolean;
  wide: boolean;
  children: ReactNode;
}

function FieldFrame({ id, field, required, wide, children }: FieldFrameProps) {
  const { hidden, missing } = useFieldState(field.pointer);
  const label = <LabelText label={field.label} unit={field.unit} required={required} />;
  const control = hidden ? (
    <HiddenValue />
  ) : missing !== undefined ? (
    <MissingValue field={field} reason={missing} />
  ) : (
    children
  );
  const rest = (
    <>
      {control}
      {field.description && (
        <p id={`${id}/help`} className="text-sm text-ink-soft">
          {field.description}
        </p>
      )}
      <div id={`${id}/error`} className="flex flex-col gap-1 empty:hidden">
        <DraftProblem address={field.pointer} />
        <FindingList address={field.pointer} />
      </div>
    </>
  );
  const canMiss = !field.derived && !hidden;
  const group = isGroup(field);
  const named = group || hidden || missing !== undefined || field.derived;
  return (
    <div
      // A legend cannot stand in a row with the control beside it, so the group is named by its label.
      {...(group ? { role: 'group', 'aria-labelledby': `${id}/label` } : {})}
      className={classNames('group/field flex min-w-0 flex-col gap-1', wide && 'sm:col-span-full')}
    >
      <div className="flex items-baseline justify-between gap-3 text-sm">
        {named ? <span id={`${id}/label`}>{label}</span> : <label htmlFor={id}>{label}</label>}
        {canMiss && <MissingControl field={field} required={required} />}
      </div>
      {rest}
    </div>
  );
}

const isWide = (field: CompiledField, maxLength: number | undefined): boolean =>
  field.type === 'choices' || isLong(field, maxLength);

/** Several controls under one name. */
const isGroup = ({ type, choices }: CompiledField): boolean =>
  type === 'boolean' || type === 'choices' || (choices !== undefined && choices.length <= radioLimit);

/** Up to so many choices are all seen at once; more become a list. */
export const radioLimit = 6;
