import { createRequire } from 'node:module';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { instrumentAjv } from './instrument-ajv.ts';
import { linearRegExp } from './linear-regexp.ts';
import { validatorCode } from './validator-code.ts';

const schema: InstrumentSchema = {
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  $id: 'urn:trial:1',
  instrumentKey: 'trial',
  title: 'Trial',
  type: 'object',
  unevaluatedProperties: false,
  required: ['pressure'],
  properties: {
    pressure: { type: 'number', unit: 'mm[Hg]', minimum: 40, maximum: 300, multipleOf: 0.1 },
    code: { type: 'string', pattern: '^[a-c]{2}$' },
    tag: { type: 'string', pattern: '^[x-z]{2}$', maxLength: 2 },
    day: { type: 'string', format: 'date' },
    hands: { type: 'array', uniqueItems: true, items: { type: 'string', enum: ['left', 'right'] } },
    tubes: { type: 'array', maxItems: 2, items: { type: 'number' } },
  },
  dependentRequired: { tubes: ['day'] },
  if: { properties: { code: { const: 'ab' } }, required: ['code'] },
  then: { properties: { reason: { type: 'string', minLength: 2 } }, required: ['reason'] },
};

interface StandaloneValidator {
  (data: unknown): boolean;
}

const runtimeNames = [
  'ajv/dist/runtime/ucs2length',
  'ajv/dist/runtime/equal',
  'ajv-formats/dist/formats',
  'linear-regexp',
];

async function browserValidator(): Promise<StandaloneValidator> {
  const module = `data:text/javascript;base64,${Buffer.from(validatorCode(schema)).toString('base64')}`;
  const { default: make } = (await import(/* @vite-ignore */ module)) as {
    default: (require: (name: string) => unknown) => Record<string, StandaloneValidator>;
  };
  const required: unknown[] = [];
  const installed = createRequire(import.meta.url);
  const validators = make((name) => {
    required.push(name);
    return name === 'linear-regexp' ? { default: linearRegExp } : installed(name);
  });
  // The browser knows four names, given by us; anything else would stop it.
  expect(runtimeNames).toEqual(expect.arrayContaining(required));
  return validators['urn:trial:1'] ?? expect.fail(Object.keys(validators).join());
}

// proves IV-08
describe('the browser’s validator', () => {
  it('judges as the server does, over a corpus of generated values', async () => {
    const browser = await browserValidator();
    const server = instrumentAjv().compile(schema);
    const odd = fc.oneof(fc.string(), fc.boolean(), fc.constant(null), fc.integer(), fc.double());
    // Mostly right, or hardly an entry as a whole would be.
    const mostly = <T>(...right: T[]) =>
      fc.oneof({ weight: 12, arbitrary: fc.constantFrom(undefined, ...right) }, odd);
    const entries = fc.record({
      pressure: fc.oneof(
        { weight: 8, arbitrary: fc.integer({ min: 380, max: 3020 }).map((tenths) => tenths / 10) },
        odd,
      ),
      code: mostly('ab', 'bc', 'xy'),
      tag: mostly('xy', 'zz', 'xyz'),
      day: mostly('2026-02-28', '2026-02-30'),
      hands: mostly(['left'], ['left', 'left'], ['both']),
      tubes: mostly([0.4, 0.5], [0.4, 0.5, 0.6]),
      reason: mostly('because', 'a'),
      extra: fc.oneof({ weight: 8, arbitrary: fc.constant(undefined) }, fc.constant(1)),
    });
    const verdicts = new Set<boolean>();
    fc.assert(
      fc.property(entries, (entry) => {
        const value: unknown = JSON.parse(JSON.stringify(entry));
        const expected = server(value);
        verdicts.add(expected);
        expect(browser(value)).toBe(expected);
      }),
      { numRuns: 1000, seed: 20260101 },
    );
    expect(verdicts).toEqual(new Set([true, false]));
  });
});
