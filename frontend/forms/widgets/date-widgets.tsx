import type { WidgetProps } from '@rjsf/utils';
import { controlLook } from '../../components/field.tsx';
import { zoneOffset } from '../../lib/format/dates.ts';
import { instantAt, wallTimeOf } from '../../lib/format/zones.ts';
import { useAddress, useFieldState, useForm } from '../form-context.ts';

/** A day, 2026-03-14. */
export function DateWidget({ id }: WidgetProps) {
  const address = useAddress(id);
  const { store, readOnly } = useForm();
  const { value } = useFieldState(address);
  return (
    <input
      id={id}
      type="date"
      aria-describedby={`${id}/help ${id}/error`}
      readOnly={readOnly}
      value={typeof value === 'string' ? value : ''}
      onChange={(event) => store.change({ pointer: address, value: event.target.value || null })}
      className={`${controlLook} max-w-44`}
    />
  );
}

/** A day and time as the clock on the site's wall shows it; kept with its offset from UTC. */
export function DateTimeWidget({ id }: WidgetProps) {
  const address = useAddress(id);
  const { store, readOnly, zone } = useForm();
  const { value } = useFieldState(address);
  const instant = typeof value === 'string' ? value : undefined;
  return (
    <span className="flex flex-wrap items-center gap-2">
      <input
        id={id}
        type="datetime-local"
        aria-describedby={`${id}/help ${id}/error`}
        readOnly={readOnly}
        value={instant ? wallTimeOf(instant, zone) : ''}
        onChange={(event) => {
          const wall = event.target.value;
          store.change({ pointer: address, value: wall === '' ? null : instantAt(wall, zone) });
        }}
        className={`${controlLook} max-w-60`}
      />
      <span className="text-sm text-ink-soft">{zoneOffset(instant ?? new Date().toISOString(), zone)}</span>
    </span>
  );
}
