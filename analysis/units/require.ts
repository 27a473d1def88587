import { DomainError } from './errors.ts';

/** Guards of the formulas: each throws a `DomainError` naming the argument, and answers nothing. */
export function requireFinite(argument: string, value: number, remedy?: string): void {
  if (!Number.isFinite(value)) throw new DomainError(argument, 'a finite number', value, remedy);
}

export function requirePositive(argument: string, value: number, remedy?: string): void {
  if (!Number.isFinite(value) || value <= 0)
    throw new DomainError(argument, 'finite and above 0', value, remedy);
}

export function requireNotNegative(argument: string, value: number, remedy?: string): void {
  if (!Number.isFinite(value) || value < 0)
    throw new DomainError(argument, 'finite and at least 0', value, remedy);
}

/** Closed interval: both ends are allowed. */
export function requireWithin(
  argument: string,
  value: number,
  low: number,
  high: number,
  remedy?: string,
): void {
  if (!(value >= low && value <= high))
    throw new DomainError(argument, `from ${low} to ${high}`, value, remedy);
}

/** Names the reading, counted from 1, that is not a positive number. */
export function requireEachPositive(argument: string, values: readonly number[], remedy?: string): void {
  values.forEach((value, index) => requirePositive(`${argument}[${index + 1}]`, value, remedy));
}

export function requireCount(
  argument: string,
  values: readonly unknown[],
  least: number,
  remedy?: string,
): void {
  if (values.length < least) {
    throw new DomainError(
      argument,
      `at least ${least} value${least === 1 ? '' : 's'}`,
      values.length,
      remedy,
    );
  }
}

/** Two series that belong together: as many values, finite, the first one (time) strictly rising. */
export function requireTimeSeries(
  times: readonly number[],
  argument: string,
  values: readonly number[],
): void {
  if (times.length !== values.length) {
    throw new DomainError(argument, `as many values as t (${times.length})`, values.length);
  }
  times.forEach((time, index) => {
    requireFinite(`t[${index + 1}]`, time);
    requireFinite(`${argument}[${index + 1}]`, values[index]!);
    if (index > 0 && time <= times[index - 1]!) {
      throw new DomainError(`t[${index + 1}]`, `later than the time before it (${times[index - 1]!})`, time);
    }
  });
}
