import type { VerificationFieldDto } from '#schemas/api/monitoring.ts';
import { HiddenValue } from '../../../components/pen-mark.tsx';
import { Quantity } from '../../../components/quantity.tsx';

/** A recorded value with the digits as written. */
export function FieldValue({ value }: { value: VerificationFieldDto['value'] }) {
  if ('hidden' in value) return <HiddenValue />;
  if (value.missing !== undefined) return <>missing: {value.missing}</>;
  const { value: held } = value;
  const written = value.written ?? (Array.isArray(held) ? held.join(', ') : String(held ?? ''));
  return <Quantity written={written} unit={value.unit} />;
}
