declare const unitOf: unique symbol;

/** A number branded with the UCUM code of its unit, so that a resistance cannot be passed for a viscosity. */
export type Quantity<Unit extends string> = number & { readonly [unitOf]: Unit };

/** Brands a number once, where data enter or where a formula returns; it changes nothing at run time. */
export function quantity<Unit extends string>(value: number): Quantity<Unit> {
  return value as Quantity<Unit>;
}
