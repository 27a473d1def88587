import { memo } from 'react';
import { classNames } from '../../components/class-names.ts';
import { spokenUnit } from '../../lib/format/units.ts';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import { rejectionReasonLabel } from '#schemas/vocabulary/rejection-reasons.ts';
import { DraftInput } from '../draft-input.tsx';
import { useFieldState, useFieldVersions, useForm } from '../form-context.ts';

interface ReadingCellProps {
  field: CompiledField;
  fieldIndex: number;
  reading: number;
  /** Many stand side by side. */
  narrow?: boolean;
}

/** One reading. Set aside it stays, struck through, with the reason. */
export const ReadingCell = memo(function ReadingCell({
  field,
  fieldIndex,
  reading,
  narrow = false,
}: ReadingCellProps) {
  const { store, idPrefix } = useForm();
  const address = `${field.pointer}/${reading}`;
  const { missing } = useFieldState(address);
  useFieldVersions(field.readings?.partners ?? [field.pointer]);
  const reason = rejectionOf(store.get, field, reading);
  const spoken = field.unit ? `, ${spokenUnit(field.unit)}` : '';
  const state = reason === undefined ? '' : `, set aside: ${rejectionReasonLabel(reason)}`;
  return (
    <td className="px-0.5 py-1" data-field={fieldIndex} data-reading={reading}>
      {missing === undefined ? (
        <DraftInput
          id={idPrefix + address}
          address={address}
          label={`${field.label}, reading ${reading + 1}${spoken}${state}`}
          numeric
          readOnly={reason !== undefined}
          className={classNames(
            'mx-auto block h-11 px-1! text-center',
            narrow ? 'w-13!' : 'w-20!',
            reason !== undefined && 'bg-bone text-ink-soft line-through',
          )}
        />
      ) : (
        <span className="text-sm text-ink-soft">not done</span>
      )}
    </td>
  );
});

/** Why a reading does not count: it was set aside here or in a field read in the same act. */
export function rejectionOf(
  get: (address: string) => { rejected?: string },
  field: CompiledField,
  reading: number,
): string | undefined {
  const partners = field.readings?.partners ?? [field.pointer];
  return partners
    .map((pointer) => get(`${pointer}/${reading}`).rejected)
    .find((reason) => reason !== undefined);
}
