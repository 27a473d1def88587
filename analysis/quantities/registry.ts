import { bloodQuantities } from './blood.ts';
import type { DerivedValue, QuantityDefinition } from './define.ts';
import type { GivenInput } from './inputs.ts';
import { dopplerQuantities } from './doppler.ts';
import { flowQuantities } from './flow.ts';
import { hyperaemiaQuantities } from './hyperaemia.ts';
import { InputError } from './input-error.ts';
import { oxygenQuantities } from './oxygen.ts';
import { poiseuilleQuantities } from './poiseuille.ts';
import { pressureQuantities } from './pressure.ts';
import { resistanceQuantities } from './resistance.ts';
import { splitQuantities } from './split.ts';
import { viscosityQuantities } from './viscosity.ts';

const definitions: readonly QuantityDefinition[] = [
  ...flowQuantities,
  ...pressureQuantities,
  ...resistanceQuantities,
  ...poiseuilleQuantities,
  ...viscosityQuantities,
  ...splitQuantities,
  ...dopplerQuantities,
  ...hyperaemiaQuantities,
  ...oxygenQuantities,
  ...bloodQuantities,
];

/** Every quantity by its snake-case key, in the order of the reference. */
export const quantities: ReadonlyMap<string, QuantityDefinition> = new Map(
  definitions.map((definition) => [definition.key, definition]),
);

const byName = new Map(definitions.map((definition) => [definition.name, definition]));

/** The quantity with this key (`fvr`) or spelled-out name (`forearmVascularResistance`). */
export function quantityNamed(name: string): QuantityDefinition | undefined {
  return quantities.get(name) ?? byName.get(name);
}

/**
 * Derives a quantity from values with units; the same code runs on server, in the browser and at the command line.
 *
 * Errors   InputError for an unknown quantity, a missing, unknown or unreadable input; UnitError for a unit that is not
 *          understood or measures something else; DomainError for a value outside the formula's domain
 *
 * @example derive('fvr', { map: { value: 90, unit: 'mm[Hg]' }, fbf: { value: 2.5, unit: 'mL/min/dL' } }).value // 36
 */
export function derive(name: string, inputs: Readonly<Record<string, GivenInput>>): DerivedValue {
  const definition = quantityNamed(name);
  if (!definition) {
    throw new InputError(
      'unknown_quantity',
      `There is no quantity named ${JSON.stringify(name)}.`,
      'Take a key or name from the list of quantities (`npm run --silent derive -- --list`).',
    );
  }
  return definition.derive(inputs);
}
