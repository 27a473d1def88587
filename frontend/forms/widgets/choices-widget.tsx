import type { WidgetProps } from '@rjsf/utils';
import { useAddress, useFieldState, useForm } from '../form-context.ts';

/** Any of several. */
export function ChoicesWidget({ id }: WidgetProps) {
  const address = useAddress(id);
  const { store, readOnly } = useForm();
  const choices = store.compiled.field(address)?.choices ?? [];
  const { value } = useFieldState(address);
  const ticked = Array.isArray(value) ? value : [];
  // In the order of the instrument, so that the same choices are the same value.
  const after = (changed: string, on: boolean) =>
    choices
      .map((choice) => String(choice.value))
      .filter((name) => (name === changed ? on : ticked.includes(name)));
  return (
    <div className="flex flex-wrap gap-x-5 gap-y-1">
      {choices.map((choice) => {
        const name = String(choice.value);
        return (
          <label key={name} className="flex min-h-9 items-center gap-2">
            <input
              type="checkbox"
              disabled={readOnly}
              checked={ticked.includes(name)}
              onChange={(event) => {
                const next = after(name, event.target.checked);
                store.change({ pointer: address, value: next.length === 0 ? null : next });
              }}
              className="size-4.5 accent-venous"
            />
            {choice.label}
          </label>
        );
      })}
    </div>
  );
}
