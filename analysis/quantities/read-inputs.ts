import { checkDeclaredUnit } from './declared-unit.ts';
import type { GivenInput } from './inputs.ts';
import { InputError } from './input-error.ts';
import type { Input, Inputs } from './inputs.ts';
import { convert, sameDimension } from '../units/convert.ts';
import { UnitError } from '../units/errors.ts';
import { multiplyUnits, parseUnit, writeUnit } from '../units/parse-unit.ts';

interface ReadInputs {
  readonly values: Record<string, number | readonly number[] | undefined>;
  /** Unit of each value handed to the formula. */
  readonly units: Record<string, string>;
  /** Unit of each value as it was given. */
  readonly givenUnits: Record<string, string>;
  /** Spelled-out name → the name that the caller used. */
  readonly nameUsed: ReadonlyMap<string, string>;
  /** Keys of inputs left to their default. */
  readonly assumed: Set<string>;
}

/** Matches given inputs, by key or spelled-out name, to those a quantity takes, and brings each to its unit. */
export function readInputs(inputs: Inputs, given: Readonly<Record<string, GivenInput>>): ReadInputs {
  const nameUsed = namesUsed(inputs, given);
  const read: ReadInputs = { values: {}, units: {}, givenUnits: {}, nameUsed, assumed: new Set() };
  // Inputs that follow another's unit are read after it.
  const ordered = Object.entries(inputs).sort(
    ([, a], [, b]) => Number(a.rule.kind === 'same') - Number(b.rule.kind === 'same'),
  );
  for (const [key, input] of ordered) {
    const used = nameUsed.get(input.name);
    if (used === undefined) readAbsent(read, key, input);
    else readPresent(read, key, input, used, given[used]);
  }
  return read;
}

function namesUsed(inputs: Inputs, given: Readonly<Record<string, GivenInput>>): Map<string, string> {
  const used = new Map<string, string>();
  for (const label of Object.keys(given)) {
    const found = Object.entries(inputs).find(([key, { name }]) => key === label || name === label);
    if (!found) {
      const known = Object.keys(inputs).join(', ');
      throw new InputError(
        'unknown_input',
        `${label} is not an input of this quantity.`,
        `It takes ${known}.`,
        label,
      );
    }
    const { name } = found[1];
    if (used.has(name)) {
      throw new InputError(
        'invalid_input',
        `${label} is given twice, also as ${used.get(name)!}.`,
        'Give it once.',
        label,
      );
    }
    used.set(name, label);
  }
  return used;
}

function readAbsent(read: ReadInputs, key: string, input: Input): void {
  if (input.default === undefined && input.arity !== 'optional') {
    throw new InputError(
      'missing_input',
      `${key} (${input.about}) is missing.`,
      input.whenMissing ?? `Give ${key} as { "value", "unit" } with a unit such as ${input.unit}.`,
      key,
    );
  }
  if (input.default !== undefined) read.assumed.add(key);
  read.values[key] = input.default;
  read.units[key] = read.givenUnits[key] = input.unit;
}

function readPresent(read: ReadInputs, key: string, input: Input, label: string, given: unknown): void {
  const { value, unit } = valueAndUnit(given, input, label);
  try {
    const target = targetUnit(read, input, unit);
    read.units[key] = target;
    read.givenUnits[key] = unit;
    const numbers = typeof value === 'number' ? [value] : value;
    const brought = numbers.map((each): number => {
      if (input.check) checkDeclaredUnit(input.check, label, each, unit);
      return convert(each, unit, target);
    });
    read.values[key] = input.arity === 'many' ? brought : brought[0]!;
  } catch (error) {
    if (error instanceof UnitError)
      throw new UnitError(error.code, `${label}: ${error.message}`, error.remedy, label);
    throw error;
  }
}

function targetUnit(read: ReadInputs, { rule, unit: own }: Input, unit: string): string {
  switch (rule.kind) {
    case 'convert':
      return own;
    case 'same': {
      const other = read.units[rule.as]!;
      return rule.perSecond ? writeUnit(multiplyUnits(parseUnit(other), parseUnit('s'), -1)) : other;
    }
    case 'keep':
      if (rule.samples.length === 0) {
        parseUnit(unit === 'Cel' ? 'K' : unit);
        return unit;
      }
      if (rule.samples.some((sample) => sameDimension(sample, unit))) return unit;
      throw new UnitError(
        'unit_mismatch',
        `${unit} does not measure what is needed here.`,
        `Give it in a unit such as ${rule.samples.join(' or ')}.`,
      );
  }
}

function valueAndUnit(
  given: unknown,
  { arity }: Input,
  label: string,
): { value: number | number[]; unit: string } {
  const { value, unit } = (typeof given === 'object' && given !== null ? given : {}) as {
    value?: unknown;
    unit?: unknown;
  };
  if (typeof unit !== 'string') {
    throw new InputError(
      'invalid_input',
      `${label} has no unit.`,
      'State its UCUM code; a number alone is not a value.',
      label,
    );
  }
  if (arity !== 'many') {
    if (typeof value === 'number' && Number.isFinite(value)) return { value, unit };
    throw new InputError(
      'invalid_input',
      `${label} is not a number.`,
      'Give one finite number with a decimal point.',
      label,
    );
  }
  if (!Array.isArray(value)) {
    throw new InputError(
      'invalid_input',
      `${label} is not a list of numbers.`,
      'Give a list such as [2.4, 2.6].',
      label,
    );
  }
  const wrong = value.findIndex((each) => typeof each !== 'number' || !Number.isFinite(each));
  if (wrong >= 0) {
    throw new InputError(
      'invalid_input',
      `${label}[${wrong + 1}] is not a number.`,
      'Leave a missing reading out.',
      `${label}[${wrong + 1}]`,
    );
  }
  return { value: value as number[], unit };
}
