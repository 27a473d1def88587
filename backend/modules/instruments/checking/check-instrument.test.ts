import { describe, expect, it } from 'vitest';
import type { SampleEntry } from '#schemas/instruments/instrument.ts';
import type { QuantityLibrary } from '#schemas/instruments/quantity-library.ts';
import { checkInstrument } from './check-instrument.ts';
import { unitProblem } from './check-unit.ts';

const noLibrary: QuantityLibrary = { get: () => undefined };

const pressure = { type: 'number', title: 'Pressure', unit: 'mm[Hg]' };
function draft(more: object = {}): object {
  return {
    $schema: 'https://json-schema.org/draft/2020-12/schema',
    instrumentKey: 'trial',
    title: 'Trial',
    type: 'object',
    additionalProperties: false,
    properties: { pressure },
    ...more,
  };
}
const withField = (field: object) => draft({ properties: { pressure: { ...pressure, ...field } } });
const verdictOf = (schema: object, samples: SampleEntry[] = [], taken: string[] = []) =>
  checkInstrument(JSON.stringify(schema), samples, noLibrary, taken);
const firstProblem = (schema: object) => {
  const [problem] = verdictOf(schema).problems;
  return `${problem?.pointer ?? ''} ${problem?.message ?? ''}`;
};

describe('a draft', () => {
  it('that is right may be published', () => {
    expect(verdictOf(draft())).toEqual({ publishable: true, problems: [], warnings: [], samples: [] });
  });

  // proves IV-05
  it.each<[string, object, string]>([
    [
      'of another dialect',
      draft({ $schema: 'http://json-schema.org/draft-07/schema#' }),
      '/$schema Instruments are JSON Schema 2020-12',
    ],
    [
      'with a misspelt keyword',
      draft({ requierd: ['pressure'] }),
      '/requierd requierd is not a keyword: did you mean required?',
    ],
    [
      'with a misspelt keyword of ours',
      withField({ unti: 'kPa' }),
      '/properties/pressure/unti unti is not a keyword: did you mean unit?',
    ],
    [
      'with a misspelt keyword in a rule',
      withField({ type: 'array', readings: { count: 3, minimun: 2 } }),
      '/properties/pressure/readings/minimun',
    ],
    [
      'with an unknown extension',
      draft({ 'x-colour': 'red' }),
      '/x-colour x-colour is not a keyword of instruments',
    ],
    [
      'with a keyword that instruments do without',
      draft({ patternProperties: {} }),
      '/patternProperties patternProperties is not used in instruments: name each field',
    ],
    ['without a key', draft({ instrumentKey: undefined }), ' "instrumentKey" is missing'],
    [
      'with a name that is none',
      draft({ properties: { __proto__x: pressure } }),
      '/properties __proto__x is no name for a field',
    ],
    [
      'with a value of the wrong kind',
      withField({ unblinding: 'yes' }),
      '/properties/pressure/unblinding unblinding must be boolean',
    ],
    ['whose text is not JSON', [] as object, ' The document must be object'],
  ])('%s is refused at the place', (_, schema, words) => {
    expect(firstProblem(schema)).toContain(words);
  });

  it('with a direct identifier is sent to the identifier form', () => {
    expect(firstProblem(withField({ identifying: 'direct' }))).toContain('kept apart');
  });

  // proves IV-06
  it.each<[string, object, string]>([
    [
      'elsewhere',
      withField({ $ref: 'https://example.org/schema.json' }),
      '/properties/pressure/$ref References stay inside',
    ],
    [
      'to nothing',
      withField({ $ref: '#/$defs/gone' }),
      '/properties/pressure/$ref #/$defs/gone leads nowhere',
    ],
    [
      'to itself',
      draft({ $defs: { a: { $ref: '#/$defs/b' }, b: { $ref: '#/$defs/a' } } }),
      'refers to itself',
    ],
    [
      'by $dynamicRef',
      withField({ $dynamicRef: '#node' }),
      '/properties/pressure/$dynamicRef $dynamicRef is not used in instruments',
    ],
  ])('that refers %s is refused', (_, schema, words) => {
    expect(firstProblem(schema)).toContain(words);
  });

  // proves IV-06
  it.each(['urn:trial:1', 'URN:Trial:1', 'urn:trial:%31', 'urn:trial:1#', 'urn:trial:１'])(
    'may not take the name of a published one: %s',
    ($id) => {
      expect(verdictOf(draft({ $id }), [], ['urn:trial:1']).problems[0]?.pointer).toBe('/$id');
    },
  );

  // proves IV-10
  it.each(['1TEST', 'NINECHARS', 'sysbp', 'SYS BP'])('may not carry the test code %s', (testCode) => {
    expect(firstProblem(withField({ testCode }))).toContain('/properties/pressure/testCode');
  });
});

// proves IV-09
describe('a unit', () => {
  it.each([
    ['mmHg', 'write mm[Hg]'],
    ['bpm', 'write /min'],
    ['mL/100mL/min', 'write mL/min/dL'],
    ['ml/min/100ml', 'write mL/min/dL'],
    ['°C', 'write Cel'],
    ['mPa·s', 'write mPa.s'],
    ['cmH2O', 'write cm[H2O]'],
    ['smoots', 'is not a UCUM code'],
    ['10cm', 'is not a UCUM code'],
    ['mL per min', 'is not a UCUM code'],
    ['', 'is not a UCUM code'],
  ])('%s is refused, with the code that was meant', (unit, words) => {
    expect(unitProblem(unit)).toContain(words);
  });

  // Codes of the field, UCUM 2.2; `haemodynamics.md` lists them as checked with another open UCUM validator.
  it.each([
    ...[
      'mm[Hg]',
      'mL/min/dL',
      'mm[Hg].min.dL/mL',
      'mPa.s',
      'L/L',
      'g/dL',
      '/min',
      'Cel',
      'deg',
      '1',
      '%',
      'kg/m2',
      'dyn.s/cm5',
    ],
    ...["[wood'U]", 'cm[H2O]', '10*3/uL', '{beats}/min', 'mL/(100.mL)/min'],
  ])('%s is taken', (unit) => {
    expect(unitProblem(unit)).toBeUndefined();
  });

  it('is refused where it stands', () => {
    expect(firstProblem(withField({ unit: 'mmHg' }))).toBe(
      '/properties/pressure/unit mmHg is not a UCUM code: write mm[Hg]',
    );
  });
});

// proves WS-10
describe('a draft without bound is refused within a second', () => {
  const nested = (depth: number) => '{"not":'.repeat(depth) + '{}' + '}'.repeat(depth);
  const explosion = draft({
    $defs: Object.fromEntries(
      Array.from({ length: 18 }, (_, level) => {
        const next = { $ref: `#/$defs/n${level + 1}` };
        return [`n${level}`, level === 17 ? { type: 'number' } : { allOf: [next, next] }];
      }),
    ),
  });
  it.each<[string, string, string]>([
    ['ten thousand levels', JSON.stringify(draft()).replace('"Trial"', nested(10_000)), 'nested more than'],
    ['references that unfold to 131,072 evaluations', JSON.stringify(explosion), 'are taken'],
    ['a megabyte', JSON.stringify(draft({ $comment: 'x'.repeat(1_000_000) })), 'at most 200000 characters'],
    [
      'a pattern that only backtracking can judge',
      JSON.stringify(withField({ type: 'string', unit: undefined, pattern: '^(a)\\1$' })),
      'bounded time',
    ],
    [
      'a pattern of repeats of repeats',
      JSON.stringify(withField({ type: 'string', unit: undefined, pattern: '^((a{99}){99}){99}$' })),
      'bounded time',
    ],
    [
      'strings that double',
      JSON.stringify(
        draft({
          checks: [
            {
              id: 'a',
              severity: 'hard',
              message: 'm',
              fields: ['/pressure'],
              expression: '"ab".split("").join("ab") == "a"',
            },
          ],
        }),
      ),
      'not available here',
    ],
    [
      'too many references',
      JSON.stringify(
        draft({
          properties: Object.fromEntries(
            Array.from({ length: 70 }, (_, at) => [`f${at}`, { $ref: '#/$defs/a' }]),
          ),
          $defs: { a: pressure },
        }),
      ),
      'At most 60 references',
    ],
  ])('%s', (_, text, words) => {
    const started = performance.now();
    const { problems, publishable } = checkInstrument(text, [], noLibrary);
    expect(performance.now() - started).toBeLessThan(1000);
    expect(publishable).toBe(false);
    expect(problems[0]?.message).toContain(words);
  });

  it('while a pattern that would stop a backtracking engine is judged in linear time', () => {
    const schema = withField({ type: 'string', unit: undefined, pattern: '^(a+)+$' });
    const sample: SampleEntry = {
      name: 'long',
      values: { '/pressure': `${'a'.repeat(5000)}!` },
      expect: { outcome: 'refused' },
    };
    const started = performance.now();
    expect(verdictOf(schema, [sample]).publishable).toBe(true);
    expect(performance.now() - started).toBeLessThan(1000);
  });
});

// proves IV-07
describe('the traps of JSON Schema', () => {
  const text = (more: object) =>
    draft({ properties: { pressure: { type: 'string', title: 'Text', ...more } } });
  const outcomeOf = (schema: object, value: string | number) =>
    verdictOf(schema, [{ name: 'one', values: { '/pressure': value }, expect: { outcome: 'passes' } }])
      .samples[0]?.outcome;

  it('a format is asserted', () => {
    expect(outcomeOf(text({ format: 'date' }), '2026-02-30')).toBe('refused');
    expect(outcomeOf(text({ format: 'date' }), '2026-02-28')).toBe('passes');
  });

  it('a pattern without anchors matches anywhere, as its author is told', () => {
    const schema = text({ pattern: '[0-9]{3}' });
    expect(verdictOf(schema).warnings[0]?.message).toContain('matches anywhere');
    expect(outcomeOf(schema, 'x1234')).toBe('passes');
    expect(outcomeOf(text({ pattern: '^[0-9]{3}$' }), 'x1234')).toBe('refused');
  });

  it('two patterns of one instrument are told apart', () => {
    const schema = draft({
      properties: {
        a: { type: 'string', title: 'A', pattern: '^a$' },
        b: { type: 'string', title: 'B', pattern: '^b$' },
      },
    });
    const sample = (b: string): SampleEntry => ({
      name: b,
      values: { '/a': 'a', '/b': b },
      expect: { outcome: 'passes' },
    });
    expect(verdictOf(schema, [sample('b'), sample('a')]).samples.map(({ outcome }) => outcome)).toEqual([
      'passes',
      'refused',
    ]);
  });
});

// proves IV-03
describe('sample values', () => {
  const schema = draft({
    required: ['pressure'],
    properties: {
      pressure: { ...pressure, minimum: 40, maximum: 300 },
      twice: { type: 'number', title: 'Twice', unit: 'mm[Hg]', derive: 'pressure * 2.0' },
    },
    checks: [
      {
        id: 'usual',
        severity: 'soft',
        expression: 'pressure < 180.0',
        message: 'High',
        fields: ['/pressure'],
      },
    ],
  });
  const sample = (value: number | undefined, expected: SampleEntry['expect']): SampleEntry => {
    return { name: 'one', values: value === undefined ? {} : { '/pressure': value }, expect: expected };
  };

  it('that come out as expected let the draft be published', () => {
    const samples = [
      sample(120, { outcome: 'passes', checks: [], derived: { '/twice': 240 } }),
      sample(200, { outcome: 'asks', checks: ['usual'] }),
      sample(320, { outcome: 'refused', checks: ['schema', 'usual'] }),
      sample(undefined, { outcome: 'refused', checks: ['required'], derived: { '/twice': null } }),
    ];
    expect(verdictOf(schema, samples)).toMatchObject({
      publishable: true,
      samples: samples.map(() => ({ passed: true })),
    });
  });

  it.each<[SampleEntry, string]>([
    [sample(120, { outcome: 'refused' }), 'Expected refused, got passes'],
    [sample(200, { outcome: 'asks', checks: ['other'] }), 'Expected the findings other, got usual'],
    [sample(120, { outcome: 'passes', derived: { '/twice': 241 } }), '/twice: expected 241, got 240'],
    [sample(120, { outcome: 'passes', derived: { '/half': 60 } }), '/half is not derived'],
    [
      { name: 'one', values: { '/pulse': 60, '/pressure': 120 }, expect: { outcome: 'passes' } },
      'has no field /pulse',
    ],
  ])('that come out otherwise hold the draft back, and say how', (one, words) => {
    const { publishable, samples } = verdictOf(schema, [one]);
    expect(publishable).toBe(false);
    expect(samples[0]?.differences.join()).toContain(words);
  });
});
