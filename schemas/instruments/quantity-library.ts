/** A quantity of the analysis library as an instrument sees it. */
export interface LibraryQuantity {
  inputs: QuantityInputDefinition[];
  unit: string;
  version: string;
  /** Throws an error whose message is for a person when no number may come out. */
  compute(inputs: Record<string, { value: number | number[]; unit: string }>): {
    value: number;
    unit: string;
    cautions: QuantityCaution[];
  };
}

export interface QuantityInputDefinition {
  name: string;
  unit: string;
  /** Takes the readings themselves, not their summary. */
  array?: boolean;
  optional?: boolean;
  /** Whether a value in another unit can be brought to this one by the quantity; absent: only the same unit. */
  accepts?: (unit: string) => boolean;
}

export interface QuantityCaution {
  code: string;
  message: string;
}

/** The quantities an instrument may refer to: given as an argument, because schemas do not import the analysis. */
export interface QuantityLibrary {
  get(name: string): LibraryQuantity | undefined;
}

/** A definition of the analysis library, as far as it is read here. */
interface QuantitySource {
  version: number;
  unit: string;
  inputs: Readonly<Record<string, InputSource>>;
  derive(given: Record<string, { value: number | number[]; unit: string }>): {
    value: number;
    unit: string;
    cautions: readonly QuantityCaution[];
  };
}

interface InputSource {
  name: string;
  unit: string;
  arity: 'one' | 'optional' | 'many';
  default?: number;
  /** `convert`: any unit of the dimension; `keep`: of one of the samples; `same`: it follows another input. */
  rule: { kind: 'convert' } | { kind: 'keep'; samples: readonly string[] } | { kind: 'same' };
}

/**
 * Makes the library of an instrument from the one of the analysis, for server and browser alike.
 *
 * @param find a quantity by its name
 * @param sameDimension whether two UCUM codes measure the same; throws for a code that it does not know
 */
export function quantityLibrary(
  find: (name: string) => QuantitySource | undefined,
  sameDimension: (one: string, other: string) => boolean,
): QuantityLibrary {
  const measuresSame = (one: string, other: string) => {
    try {
      return sameDimension(one, other);
    } catch {
      return false; // A unit that the analysis does not know cannot be converted by it.
    }
  };
  const accepts = ({ unit, rule }: InputSource, given: string) => {
    if (rule.kind === 'convert') return measuresSame(unit, given);
    return (
      rule.kind === 'same' ||
      rule.samples.length === 0 ||
      rule.samples.some((one) => measuresSame(one, given))
    );
  };
  return {
    get(name) {
      const source = find(name);
      if (!source) return undefined;
      return {
        unit: source.unit,
        version: String(source.version),
        inputs: Object.values(source.inputs).map((input) => ({
          name: input.name,
          unit: input.unit,
          array: input.arity === 'many',
          optional: input.arity === 'optional' || input.default !== undefined,
          accepts: (given) => accepts(input, given),
        })),
        compute(inputs) {
          const { value, unit, cautions } = source.derive(inputs);
          return { value, unit, cautions: cautions.map(({ code, message }) => ({ code, message })) };
        },
      };
    },
  };
}
