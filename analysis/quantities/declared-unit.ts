import type { Input } from './inputs.ts';
import { convert } from '../units/convert.ts';
import { DomainError } from '../units/errors.ts';

/** Declared unit and value must be able to both be right; a mix-up is stopped with its remedy, never converted. */
export function checkDeclaredUnit(
  check: NonNullable<Input['check']>,
  argument: string,
  value: number,
  unit: string,
): void {
  const asFraction = convert(1, unit, check === 'haemoglobin' ? 'g/dL' : '1');
  checks[check](argument, value, asFraction, unit);
}

const checks: Record<
  NonNullable<Input['check']>,
  (argument: string, value: number, scale: number, unit: string) => void
> = {
  haematocrit(argument, value, scale, unit) {
    const possible = scale === 1 ? value >= 0 && value <= 1 : value * scale >= 0.05 && value * scale <= 0.75;
    if (!possible) {
      throw new DomainError(
        argument,
        scale === 1 ? 'a fraction from 0 to 1 (its unit is L/L)' : `from 5 to 75 % (its unit is ${unit})`,
        value,
        value > 1 && value < 5
          ? 'Between 1 and 5 it can be neither a fraction nor a percentage: read the source again.'
          : scale === 1
            ? 'Give 0.42 with the unit L/L, or 42 with the unit %.'
            : 'Give 42 with the unit %, or 0.42 with the unit L/L.',
      );
    }
  },
  saturation(argument, value, scale) {
    if (scale === 1 ? !(value >= 0 && value <= 1) : !(value > 1 && value * scale <= 1)) {
      throw new DomainError(
        argument,
        scale === 1 ? 'a fraction from 0 to 1' : 'a percentage above 1 and at most 100',
        value,
        'Give 0.98 with the unit 1, or 98 with the unit %.',
      );
    }
  },
  flag(argument, value) {
    if (value !== 0 && value !== 1) {
      throw new DomainError(argument, '0 or 1', value, 'Give 1 for yes and 0 for no, with the unit 1.');
    }
  },
  haemoglobin(argument, value, scale, unit) {
    if (!(value * scale >= 2 && value * scale <= 25)) {
      throw new DomainError(
        argument,
        'from 2 to 25 g/dL (20 to 250 g/L)',
        value,
        `Its unit was given as ${unit}: 8 to 20 looks like g/dL, 80 to 200 like g/L.`,
      );
    }
  },
};
