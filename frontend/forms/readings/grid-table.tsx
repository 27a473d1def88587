import type { ClipboardEvent, FocusEvent, KeyboardEvent, ReactNode } from 'react';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import { LabelText } from '../../components/field.tsx';
import { HiddenValue } from '../../components/pen-mark.tsx';
import { useFieldState, useFieldVersions, useForm } from '../form-context.ts';
import type { FormStore } from '../form-store.ts';
import { MissingControl, MissingValue } from '../missing-control.tsx';
import type { GridShape } from './grid-keys.ts';
import { ReadingCell } from './reading-cell.tsx';
import { ReadingSummary } from './reading-summary.tsx';

interface GridTableProps {
  fields: readonly CompiledField[];
  required: readonly string[];
  shape: GridShape;
  onKeyDown: (event: KeyboardEvent) => void;
  onPaste: (event: ClipboardEvent) => void;
  onFocus: (event: FocusEvent) => void;
}

const head = 'px-1 py-1 text-sm font-medium text-ink-soft';

/** The readings as a real table, one line a field or one line a reading. */
export function GridTable({ fields, required, shape, onKeyDown, onPaste, onFocus }: GridTableProps) {
  const numbers = numbersTo(shape.readings);
  return (
    <div className="overflow-x-auto">
      {/* The keys belong to the inputs inside; the table only listens for all of them. */}
      {/* eslint-disable-next-line jsx-a11y/no-noninteractive-element-interactions */}
      <table
        className="border-separate border-spacing-0"
        onKeyDown={onKeyDown}
        onPaste={onPaste}
        onFocus={onFocus}
      >
        <caption className="sr-only">{fields.map(({ label }) => label).join(', ')}: readings</caption>
        {shape.readingsAcross ? (
          <>
            <thead>
              <tr>
                <td />
                {numbers.map((reading) => (
                  <th key={reading} scope="col" className={head}>
                    {reading + 1}
                  </th>
                ))}
                <th scope="col" className={head}>
                  so far
                </th>
              </tr>
            </thead>
            <tbody>
              {fields.map((field, at) => (
                <tr key={field.pointer}>
                  <th scope="row" className="min-w-32 py-1 pr-3 text-left text-sm font-normal">
                    <FieldHead field={field} required={required.includes(field.pointer)} />
                  </th>
                  <WholeLine field={field} span={shape.readings + 1}>
                    {numbers.map((reading) => (
                      <ReadingCell key={reading} field={field} fieldIndex={at} reading={reading} narrow />
                    ))}
                    <td className="px-2 text-center">
                      <ReadingSummary field={field} />
                    </td>
                  </WholeLine>
                </tr>
              ))}
            </tbody>
          </>
        ) : (
          <>
            <thead>
              <tr>
                <th scope="col" className={`${head} pr-3 text-left`}>
                  reading
                </th>
                {fields.map((field) => (
                  <th
                    key={field.pointer}
                    scope="col"
                    className="px-1 py-1 text-left align-bottom text-sm font-normal"
                  >
                    <FieldHead field={field} required={required.includes(field.pointer)} />
                  </th>
                ))}
              </tr>
            </thead>
            <tbody>
              {numbers.map((reading) => (
                <tr key={reading}>
                  <th scope="row" className={`${head} text-left`}>
                    {reading + 1}
                  </th>
                  {fields.map((field, at) => (
                    <ColumnCell
                      key={field.pointer}
                      field={field}
                      first={reading === 0}
                      lines={shape.readings}
                    >
                      <ReadingCell field={field} fieldIndex={at} reading={reading} />
                    </ColumnCell>
                  ))}
                </tr>
              ))}
              <tr>
                <th scope="row" className={`${head} text-left`}>
                  so far
                </th>
                {fields.map((field) => (
                  <td key={field.pointer} className="px-2 py-1 text-center">
                    <Summary field={field} />
                  </td>
                ))}
              </tr>
            </tbody>
          </>
        )}
      </table>
    </div>
  );
}

function FieldHead({ field, required }: { field: CompiledField; required: boolean }) {
  const { hidden } = useFieldState(field.pointer);
  const { store } = useForm();
  useFieldVersions([field.pointer]);
  const begun = numbersTo(field.readings?.most ?? 0).some((reading) => hasContent(store, field, reading));
  return (
    <span className="group/field flex flex-wrap items-baseline gap-x-2">
      <span>
        <LabelText label={field.label} unit={field.unit} required={required} />
      </span>
      {!hidden && !begun && <MissingControl field={field} required={required} />}
    </span>
  );
}

/** A hidden or missing field takes the place of its cells. */
function WholeLine({ field, span, children }: { field: CompiledField; span: number; children: ReactNode }) {
  const { hidden, missing } = useFieldState(field.pointer);
  if (hidden) {
    return (
      <td colSpan={span} className="h-13 px-1">
        <HiddenValue />
      </td>
    );
  }
  if (missing === undefined) return children;
  return (
    <td colSpan={span} className="px-1">
      <MissingValue field={field} reason={missing} />
    </td>
  );
}

interface ColumnCellProps {
  field: CompiledField;
  first: boolean;
  lines: number;
  children: ReactNode;
}

function ColumnCell({ field, first, lines, children }: ColumnCellProps) {
  const { hidden, missing } = useFieldState(field.pointer);
  if (!hidden && missing === undefined) return children;
  if (!first) return null;
  return (
    <td rowSpan={lines} className="px-1">
      {hidden ? <HiddenValue /> : <MissingValue field={field} reason={missing!} />}
    </td>
  );
}

function Summary({ field }: { field: CompiledField }) {
  const { hidden, missing } = useFieldState(field.pointer);
  return hidden || missing !== undefined ? null : <ReadingSummary field={field} />;
}

const numbersTo = (count: number) => Array.from({ length: count }, (_, at) => at);

const hasContent = (store: FormStore, { pointer }: CompiledField, reading: number): boolean => {
  const { value, draft } = store.get(`${pointer}/${reading}`);
  return value !== undefined || (draft ?? '') !== '';
};
