import { DomainError } from '../units/errors.ts';
import { requireWithin } from '../units/require.ts';

/** Whether a haematocrit is a fraction of 1 that a formula can take. */
export function requireHaematocrit(haematocrit: number, low = 0, high = 1, argument = 'haematocrit'): void {
  requireWithin(
    argument,
    haematocrit,
    low,
    high,
    'Haematocrit is a fraction of 1 (0.42), or say that its unit is %.',
  );
  if (haematocrit === 1)
    throw new DomainError(argument, 'below 1', 1, 'A haematocrit of 1 leaves no plasma.');
}
