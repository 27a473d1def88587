import { readableUnit, spokenUnit } from '../lib/format/units.ts';

interface QuantityProps {
  /** The digits, as written or formatted; never reformatted here. */
  written: string;
  /** UCUM code. */
  unit?: string | undefined;
  large?: boolean;
}

/** A number and its unit: digits kept, unit short to the eye and in full to the ear. */
export function Quantity({ written, unit, large = false }: QuantityProps) {
  const readable = unit ? readableUnit(unit) : '';
  return (
    <span className="whitespace-nowrap">
      <span className={large ? 'text-xl font-semibold text-soot' : undefined}>{written}</span>
      {readable && (
        <>
          <span aria-hidden className="text-sm text-ink-soft">
            {'\u00a0'}
            {readable}
          </span>
          <span className="sr-only"> {spokenUnit(unit!)}</span>
        </>
      )}
    </span>
  );
}
