import type { WidgetProps } from '@rjsf/utils';
import { DraftInput } from '../draft-input.tsx';
import { useAddress, useForm } from '../form-context.ts';
import { DerivedWidget } from './derived-widget.tsx';
import { isLong } from './long-text.ts';

/** Numbers and text: both are typed as text, so that the digits stay as written. */
export function TextWidget({ id, schema }: WidgetProps) {
  const address = useAddress(id);
  const field = useForm().store.compiled.field(address);
  if (field?.derived) return <DerivedWidget id={id} />;
  const numeric = field?.type === 'number' || field?.type === 'integer';
  return (
    <DraftInput
      id={id}
      address={address}
      numeric={numeric}
      multiline={isLong(field, schema.maxLength)}
      className={numeric ? 'max-w-44' : ''}
    />
  );
}
