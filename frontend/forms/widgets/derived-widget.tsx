import { Quantity } from '../../components/quantity.tsx';
import { formatNumber } from '../../lib/format/numbers.ts';
import { useAddress, useFieldState, useForm } from '../form-context.ts';

/** A computed value: read-only, with its unit and what it warns of. */
export function DerivedWidget({ id }: { id: string }) {
  const address = useAddress(id);
  const field = useForm().store.compiled.field(address);
  const { value, written, cautions } = useFieldState(address);
  const digits =
    written ?? (typeof value === 'number' ? formatNumber(value, { significant: 4 }) : value?.toString());
  return (
    <output id={id} aria-labelledby={`${id}/label`} className="flex min-h-9 flex-col justify-center gap-0.5">
      {digits === undefined ? (
        <span className="text-sm text-ink-soft">computed when its fields are filled in</span>
      ) : (
        <Quantity written={digits} unit={field?.unit} large />
      )}
      {cautions?.map(({ code, message }) => (
        <span key={code} className="text-sm text-straw">
          {message}
        </span>
      ))}
    </output>
  );
}
