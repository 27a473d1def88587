import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import { readingsOf, summarise } from '#schemas/instruments/readings.ts';
import { Quantity } from '../../components/quantity.tsx';
import { formatNumber } from '../../lib/format/numbers.ts';
import { useFieldVersions, useForm } from '../form-context.ts';

/** How many readings count so far, and the one value they stand for. */
export function ReadingSummary({ field }: { field: CompiledField }) {
  const { store } = useForm();
  useFieldVersions(field.readings?.partners ?? [field.pointer]);
  const { counted } = readingsOf(store.compiled, field, store.entryValues());
  const summary = summarise(field, counted);
  return (
    <span className="flex flex-col items-center leading-4.5">
      <span className="text-base font-semibold text-soot">
        {summary === undefined ? (
          '–'
        ) : (
          <Quantity written={formatNumber(summary, { decimals: decimalsOf(store.get, field, counted) })} />
        )}
      </span>
      <span data-print="hide" className="text-xs whitespace-nowrap text-ink-soft">
        {counted.length} count, {field.readings?.minimum} needed
      </span>
    </span>
  );
}

/** As many decimals as the readings were written with, and at least one. */
function decimalsOf(
  get: (address: string) => { written?: string },
  field: CompiledField,
  counted: readonly { index: number }[],
): number {
  const decimals = counted.map(
    ({ index }) => get(`${field.pointer}/${index}`).written?.split('.')[1]?.length ?? 0,
  );
  return Math.max(1, ...decimals);
}
