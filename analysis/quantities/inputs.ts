import type { Quantity } from '../units/quantity.ts';

/** A value as it comes in, with the UCUM code of its unit. */
export interface GivenInput {
  readonly value: number | readonly number[];
  readonly unit: string;
}

/** How an input's unit is read: converted to a fixed one, kept as given, or made the same as another input's. */
export type UnitRule =
  | { readonly kind: 'convert' }
  /** Any unit of the dimension of one of these samples; any unit at all without samples. */
  | { readonly kind: 'keep'; readonly samples: readonly string[] }
  /** The unit of another input, over time where `perSecond` says so. */
  | { readonly kind: 'same'; readonly as: string; readonly perSecond?: boolean };

export type Arity = 'one' | 'optional' | 'many';

/** What a quantity takes. `name` is the spelled-out name and that of the formula's argument. */
export interface Input<Unit extends string = string, Many extends Arity = Arity> {
  readonly name: string;
  readonly about: string;
  readonly unit: Unit;
  readonly domain: string;
  readonly arity: Many;
  readonly rule: UnitRule;
  readonly default?: number;
  /** A value and its declared unit that cannot both be right are stopped, never converted. */
  readonly check?: 'haematocrit' | 'haemoglobin' | 'saturation' | 'flag';
  /** What to do when it is missing. */
  readonly whenMissing?: string;
}

type Extra = Partial<Pick<Input, 'check' | 'whenMissing'>>;

const converted: UnitRule = { kind: 'convert' };

export function single<Unit extends string>(
  unit: Unit,
  name: string,
  about: string,
  domain: string,
  extra: Extra = {},
): Input<Unit, 'one'> {
  return { unit, name, about, domain, arity: 'one', rule: converted, ...extra };
}

export function optional<Unit extends string>(
  unit: Unit,
  name: string,
  about: string,
  domain: string,
  extra: Extra = {},
): Input<Unit, 'optional'> {
  return { unit, name, about, domain, arity: 'optional', rule: converted, ...extra };
}

export function many<Unit extends string>(
  unit: Unit,
  name: string,
  about: string,
  domain: string,
): Input<Unit, 'many'> {
  return { unit, name, about, domain, arity: 'many', rule: converted };
}

/** An input that may be left out: the formula then takes the default. */
export function defaulted<Unit extends string>(input: Input<Unit, 'one'>, value: number): Input<Unit, 'one'> {
  return { ...input, default: value };
}

/** An input whose unit is kept: the result's unit follows from it. */
export function kept<Many extends Arity>(
  input: Input<string, Many>,
  ...samples: string[]
): Input<string, Many> {
  return { ...input, rule: { kind: 'keep', samples } };
}

/** An input brought to the unit of another one, named by its key. */
export function sameUnit<Many extends Arity>(
  input: Input<string, Many>,
  as: string,
  perSecond = false,
): Input<string, Many> {
  return { ...input, rule: { kind: 'same', as, perSecond } };
}

/** A yes or no: 1 or 0. */
export function flag(name: string, about: string): Input<'1', 'one'> {
  return defaulted(single('1', name, about, '0 or 1', { check: 'flag' }), 0);
}

export type Inputs = Readonly<Record<string, Input>>;

export type Values<Taken extends Inputs> = {
  readonly [Key in keyof Taken]: Taken[Key] extends Input<infer Unit, infer Many>
    ? Many extends 'many'
      ? readonly Quantity<Unit>[]
      : Many extends 'optional'
        ? Quantity<Unit> | undefined
        : Quantity<Unit>
    : never;
};

export type Units<Taken extends Inputs> = { readonly [Key in keyof Taken]: string };
