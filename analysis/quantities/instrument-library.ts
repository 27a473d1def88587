import type { Caution } from '../cautions/cautions.ts';
import type { GivenInput } from './define.ts';
import { quantityNamed } from './registry.ts';

/** A quantity in the shape in which instruments and protocols ask for it. */
export interface InstrumentQuantity {
  inputs: { name: string; unit: string; array?: boolean }[];
  unit: string;
  version: string;
  compute: (inputs: Record<string, GivenInput>) => { value: number; unit: string; cautions: Caution[] };
}

const known = new Map<string, InstrumentQuantity>();

/** The library's quantity of this name; undefined when there is none. The same on server and in the browser. */
export function instrumentQuantity(name: string): InstrumentQuantity | undefined {
  const found = known.get(name);
  if (found !== undefined) return found;
  const definition = quantityNamed(name);
  if (definition === undefined) return undefined;
  const quantity: InstrumentQuantity = {
    inputs: Object.values(definition.inputs).map((input) => ({
      name: input.name,
      unit: input.unit,
      ...(input.arity === 'many' ? { array: true } : {}),
    })),
    unit: definition.unit,
    version: String(definition.version),
    compute: (inputs) => {
      const { value, unit, cautions } = definition.derive(inputs);
      return { value, unit, cautions: [...cautions] };
    },
  };
  known.set(name, quantity);
  return quantity;
}

/** The quantities that instruments may refer to. */
export const instrumentLibrary = { get: instrumentQuantity };
