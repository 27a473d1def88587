/** A formula was asked for a value outside its domain. Names the argument, what it must be, what it was and the way out. */
export class DomainError extends Error {
  readonly code = 'outside_domain';

  constructor(
    readonly argument: string,
    readonly requirement: string,
    readonly value: unknown,
    readonly remedy = `Give ${argument} as ${requirement}.`,
  ) {
    super(`${argument} must be ${requirement}, but is ${shown(value)}.`);
    this.name = 'DomainError';
  }
}

/** A unit that is not understood, or that has another dimension than the quantity needs. */
export class UnitError extends Error {
  constructor(
    readonly code: 'unknown_unit' | 'unit_mismatch',
    message: string,
    readonly remedy: string,
    readonly argument?: string,
  ) {
    super(message);
    this.name = 'UnitError';
  }
}

function shown(value: unknown): string {
  if (value === undefined) return 'missing';
  return typeof value === 'number' ? String(value) : JSON.stringify(value);
}
