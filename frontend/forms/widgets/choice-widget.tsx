import type { WidgetProps } from '@rjsf/utils';
import type { Operation } from '#schemas/api/capture.ts';
import { controlLook } from '../../components/field.tsx';
import { useAddress, useFieldState, useForm } from '../form-context.ts';
import { radioLimit } from '../templates/field-template.tsx';
import { ChoicesWidget } from './choices-widget.tsx';
import { DerivedWidget } from './derived-widget.tsx';

type ChoiceValue = string | number | boolean;

const yesOrNo = [
  { value: true, label: 'Yes' },
  { value: false, label: 'No' },
];

/** One of several: radios for a few, a list for many. Yes or no too, because an empty box is not "no" (DE-06). */
export function ChoiceWidget(props: WidgetProps) {
  const { id } = props;
  const address = useAddress(id);
  const { store, readOnly } = useForm();
  const field = store.compiled.field(address);
  const { value } = useFieldState(address);
  if (field?.derived) return <DerivedWidget id={id} />;
  if (field?.type === 'choices') return <ChoicesWidget {...props} />;
  const choices: readonly { value: ChoiceValue; label: string }[] = field?.choices ?? yesOrNo;
  const choose = (chosen: ChoiceValue | undefined) => store.change(operationFor(address, chosen));

  if (choices.length > radioLimit) {
    const at = choices.findIndex((choice) => choice.value === value);
    return (
      <select
        id={id}
        aria-describedby={`${id}/help ${id}/error`}
        disabled={readOnly}
        value={at}
        onChange={(event) => choose(choices[Number(event.target.value)]?.value)}
        className={controlLook}
      >
        <option value={-1}>choose…</option>
        {choices.map(({ label }, index) => (
          <option key={label} value={index}>
            {label}
          </option>
        ))}
      </select>
    );
  }
  return (
    <div className="flex flex-wrap gap-x-5 gap-y-1">
      {choices.map((choice) => (
        <label key={choice.label} className="flex min-h-9 items-center gap-2">
          <input
            type="radio"
            name={id}
            disabled={readOnly}
            checked={choice.value === value}
            onChange={() => choose(choice.value)}
            className="size-4.5 accent-venous"
          />
          {choice.label}
        </label>
      ))}
      {value !== undefined && !readOnly && (
        <button
          type="button"
          data-print="hide"
          className="min-h-6 text-sm text-ink-soft hover:underline"
          onClick={() => choose(undefined)}
        >
          take it back
        </button>
      )}
    </div>
  );
}

/** A number keeps its digits beside the value, also where it was chosen. */
function operationFor(pointer: string, value: ChoiceValue | undefined): Operation {
  if (value === undefined) return { pointer, value: null };
  return typeof value === 'number' ? { pointer, value, written: String(value) } : { pointer, value };
}
