import { cautions } from '../cautions/cautions.ts';
import type { Caution, CautionCode } from '../cautions/cautions.ts';
import type { GivenInput, Inputs, Units, Values } from './inputs.ts';
import { readInputs } from './read-inputs.ts';
import { convert } from '../units/convert.ts';
import { DomainError } from '../units/errors.ts';
import type { Quantity } from '../units/quantity.ts';
import { requireFinite } from '../units/require.ts';

export interface DerivedValue {
  readonly value: number;
  readonly unit: string;
  readonly cautions: readonly Caution[];
}

/** A quantity that the laboratory derives: what it takes, what it gives, where it comes from, and how to compute it. */
export interface QuantityDefinition {
  /** Snake-case key of the check files. */
  readonly key: string;
  /** Spelled-out name for instruments. */
  readonly name: string;
  readonly title: string;
  readonly version: number;
  readonly inputs: Inputs;
  /** UCUM code of the result, or how it follows from the inputs. */
  readonly unit: string;
  readonly formula: string;
  readonly source: string;
  /** Throws DomainError, UnitError or InputError; never returns NaN. */
  readonly derive: (given: Readonly<Record<string, GivenInput>>) => DerivedValue;
}

interface Definition<Taken extends Inputs, Unit extends string> {
  readonly key: string;
  readonly name: string;
  readonly title: string;
  readonly inputs: Taken;
  /** A fixed unit, or one that follows from the units of the inputs. */
  readonly unit: Unit | ((units: Units<Taken>) => string);
  /** How a unit that follows is described in lists. */
  readonly unitAbout?: string;
  /** Shows the result in another unit when the inputs came so. */
  readonly shownIn?: (given: Units<Taken>) => string;
  readonly formula: string;
  readonly source: string;
  readonly compute: (values: Values<Taken>, units: Units<Taken>) => Quantity<NoInfer<Unit>>;
  readonly cautions?: (
    values: Values<Taken>,
    result: number,
    /** Keys of inputs left to their default. */
    assumed: ReadonlySet<string>,
  ) => readonly (CautionCode | false | undefined)[];
}

/** Makes a quantity of its formula, so that inputs in any convertible unit come to it in its own. */
export function define<Taken extends Inputs, Unit extends string>(
  definition: Definition<Taken, Unit>,
): QuantityDefinition {
  const { key, name, title, inputs, unit, formula, source } = definition;
  return {
    key,
    name,
    title,
    version: 1,
    inputs,
    unit: typeof unit === 'string' ? unit : (definition.unitAbout ?? 'that of the inputs'),
    formula,
    source,
    derive(given) {
      const { values, units, givenUnits, nameUsed, assumed } = readInputs(inputs, given);
      try {
        const taken = values as Values<Taken>;
        const value: number = definition.compute(taken, units as Units<Taken>);
        requireFinite('result', value, 'The inputs are too large or too small for this formula.');
        const own = typeof unit === 'string' ? unit : unit(units as Units<Taken>);
        const shown = definition.shownIn?.(givenUnits as Units<Taken>) ?? own;
        return {
          value: convert(value, own, shown),
          unit: shown,
          cautions: cautions(definition.cautions?.(taken, value, assumed) ?? []),
        };
      } catch (error) {
        throw inWordsOfTheCaller(error, nameUsed);
      }
    },
  };
}

/** The formula names its argument; the caller is told the name that was used for it. */
function inWordsOfTheCaller(error: unknown, nameUsed: ReadonlyMap<string, string>): unknown {
  if (!(error instanceof DomainError)) return error;
  const [, argument = '', rest = ''] = /^(\w+)(.*)$/.exec(error.argument) ?? [];
  const used = nameUsed.get(argument);
  if (used === undefined || used === argument) return error;
  return new DomainError(used + rest, error.requirement, error.value, error.remedy);
}
