import type { Input, UnitRule } from './inputs.ts';
import { quantities } from './registry.ts';

/** Every quantity as plain data: what it takes, in which units, where it holds, by which formula, from which source. */
export function listQuantities() {
  return [...quantities.values()].map(({ key, name, title, version, inputs, unit, formula, source }) => ({
    key,
    name,
    title,
    version,
    inputs: Object.entries(inputs).map(([inputKey, input]) => listInput(inputKey, input)),
    unit,
    formula,
    source,
  }));
}

function listInput(key: string, input: Input) {
  return {
    key,
    name: input.name,
    about: input.about,
    unit: input.unit,
    accepts: accepted(input.rule),
    required: input.arity !== 'optional' && input.default === undefined,
    ...(input.default !== undefined && { default: input.default }),
    array: input.arity === 'many',
    domain: input.domain,
  };
}

function accepted(rule: UnitRule): string {
  switch (rule.kind) {
    case 'convert':
      return 'any unit of the same dimension';
    case 'keep':
      return rule.samples.length === 0
        ? 'any unit'
        : `any unit of the dimension of ${rule.samples.join(' or ')}`;
    case 'same':
      return `the dimension of ${rule.as}${rule.perSecond ? ' over time' : ''}`;
  }
}
