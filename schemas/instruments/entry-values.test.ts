import { describe, expect, it } from 'vitest';
import { formatAddress, parseAddress } from './address.ts';
import { operationProblem } from './check-operation.ts';
import { checkValues } from './check-values.ts';
import { compilePublished } from './compile-instrument.ts';
import { deriveValues, withDerived } from './derive-values.ts';
import { toDocument, toValues } from './document.ts';
import type { EntryValues } from './entry-values.ts';
import type { FieldSchema, InstrumentSchema, ReadingsRule } from './instrument.ts';
import type { QuantityLibrary } from './quantity-library.ts';
import { readingsOf } from './readings.ts';

const pressureRule: ReadingsRule = {
  ...{
    count: 3,
    minimum: 2,
    discardFirst: 1,
    use: { last: 2 },
    summary: 'mean',
    replaceRejected: true,
    together: 'cuff',
  },
  extraIfDiffer: { by: 5 },
};
const readings = (title: string, unit: string, rule: ReadingsRule, more: FieldSchema = {}): FieldSchema => {
  return { type: 'array', title, unit, items: { type: 'number' }, readings: rule, ...more };
};

const schema: InstrumentSchema = {
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  instrumentKey: 'trial',
  title: 'Trial',
  type: 'object',
  additionalProperties: false,
  required: ['systolic', 'diastolic', 'tube', 'posture'],
  properties: {
    systolic: readings('Systolic', 'mm[Hg]', pressureRule, { maxItems: 6 }),
    diastolic: readings('Diastolic', 'mm[Hg]', pressureRule, { maxItems: 6 }),
    tube: readings('Tube', 'L/L', {
      ...{
        count: 2,
        minimum: 2,
        use: 'all',
        summary: 'median',
        replaceRejected: true,
        extraIfDiffer: { by: 0.01 },
      },
    }),
    posture: { type: 'string', title: 'Posture', enum: ['supine', 'seated'], missingReasons: ['not-done'] },
    age: { type: 'integer', title: 'Age', unit: 'a' },
    meanPressure: {
      type: 'number',
      title: 'Mean pressure',
      unit: 'mm[Hg]',
      derive: 'mean(diastolic) + (mean(systolic) - mean(diastolic)) / 3.0',
    },
    ratio: {
      type: 'number',
      title: 'Ratio',
      unit: '1',
      derive: 'meanPressure / (mean(systolic) - mean(diastolic))',
    },
    half: {
      type: 'number',
      title: 'Half',
      unit: 'L/L',
      derive: { quantity: 'half', inputs: { whole: '/tube' } },
    },
    sum: {
      type: 'number',
      title: 'Sum',
      unit: 'L/L',
      derive: { quantity: 'sum', inputs: { parts: '/tube' } },
    },
  },
  checks: [
    {
      id: 'systolic-above-diastolic',
      severity: 'hard',
      expression: 'eachAbove(systolic, diastolic)',
      readings: 'entered',
      message: 'Each systolic pressure must be above its diastolic',
      fields: ['/systolic', '/diastolic'],
    },
    {
      id: 'usual',
      severity: 'soft',
      expression: 'meanPressure > 60.0',
      message: 'Low',
      fields: ['/meanPressure'],
      opensQuery: true,
    },
    { id: 'third-tube', severity: 'soft', expression: 'tube[2] > 0.0', message: 'Tube 3', fields: ['/tube'] },
  ],
};

const library: QuantityLibrary = {
  get(name) {
    const shape = { unit: 'L/L', version: '7' };
    if (name === 'half') {
      return {
        ...shape,
        inputs: [{ name: 'whole', unit: 'L/L' }],
        compute: ({ whole }) => {
          if (Number(whole?.value) > 0.7) throw new Error('whole must be below 0.7');
          return {
            value: Number(whole?.value) / 2,
            unit: 'L/L',
            cautions: [{ code: 'halved', message: 'Only half' }],
          };
        },
      };
    }
    return {
      ...shape,
      inputs: [{ name: 'parts', unit: 'L/L', array: true }],
      compute: ({ parts }) => ({
        value: (parts?.value as number[]).reduce((a, b) => a + b, 0),
        unit: 'L/L',
        cautions: [],
      }),
    };
  },
};

const compiled = compilePublished(schema, library);
const derive = (values: EntryValues) => deriveValues(compiled, values, library);
const cuff = (systolic: number[], diastolic: number[]): EntryValues =>
  Object.fromEntries([
    ...systolic.map((value, index) => [`/systolic/${index}`, value] as const),
    ...diastolic.map((value, index) => [`/diastolic/${index}`, value] as const),
  ]);
const stateOf = (pointer: string, values: EntryValues) => {
  const field = compiled.field(pointer) ?? expect.fail(pointer);
  const { counted, expected, extraAsked } = readingsOf(compiled, field, values);
  return { counted: counted.map(({ value }) => value), expected, extraAsked };
};

describe('an address', () => {
  it.each(['/height', '/group/height', '/systolic/0', '/systolic/12!rejected'])(
    '%s survives reading and writing',
    (text) => {
      const address = parseAddress(text) ?? expect.fail(text);
      expect(formatAddress(address)).toBe(text);
    },
  );

  it.each(['height', '/Height', '/a/01', '/a!rejected', '/__proto__', '/a/0/b', '', '/'])(
    '%s is none',
    (text) => {
      expect(parseAddress(text)).toBeUndefined();
    },
  );
});

describe('readings', () => {
  it('leave out the first and take the last two', () => {
    expect(stateOf('/systolic', cuff([140, 122, 120], [90, 82, 80]))).toEqual({
      counted: [122, 120],
      expected: 3,
      extraAsked: false,
    });
  });

  it('ask for one more when the last two differ by more than the rule allows, in any field read with them', () => {
    const values = cuff([140, 122, 120], [90, 86, 80]);
    expect(stateOf('/systolic', values)).toEqual({ counted: [122, 120], expected: 4, extraAsked: true });
    expect(stateOf('/systolic', cuff([140, 122, 117], [90, 80, 80])).extraAsked).toBe(false);
    expect(stateOf('/systolic', cuff([140, 122, 120, 121], [90, 86, 80, 81]))).toEqual({
      counted: [120, 121],
      expected: 4,
      extraAsked: true,
    });
  });

  it('are set aside in all fields of one act, and taken again', () => {
    const values = { ...cuff([140, 122, 120, 118], [90, 82, 80, 78]), '/systolic/1!rejected': 'movement' };
    expect(stateOf('/diastolic', values)).toEqual({ counted: [80, 78], expected: 4, extraAsked: false });
  });

  it('count only where each field of the act has one', () => {
    expect(stateOf('/systolic', cuff([140, 122, 120], [90, 82])).counted).toEqual([122]);
  });

  it('see 0.45 and 0.44 as 0.01 apart, as they are written', () => {
    expect(stateOf('/tube', { '/tube/0': 0.45, '/tube/1': 0.44 }).extraAsked).toBe(false);
    expect(stateOf('/tube', { '/tube/0': 0.45, '/tube/1': 0.438 })).toEqual({
      counted: [0.45, 0.438],
      expected: 3,
      extraAsked: true,
    });
  });
});

describe('derived values', () => {
  it('carry value, unit, inputs, rule and version', () => {
    // 80 + (120 − 80) / 3 by hand.
    const { '/meanPressure': result } = derive(cuff([140, 120, 120], [90, 80, 80]));
    expect(result).toMatchObject({ unit: 'mm[Hg]', cautions: [], inputs: ['/diastolic', '/systolic'] });
    expect(result).toHaveProperty('value', expect.closeTo(80 + 40 / 3, 12));
    expect(result?.rule.version).toBe('1');
  });

  it('give quantities the summary of readings, or the list where they ask for one', () => {
    // Three tubes 0.40, 0.43, 0.44: median 0.43, half of it 0.215; sum 1.27.
    const derived = derive({ '/tube/0': 0.4, '/tube/1': 0.43, '/tube/2': 0.44 });
    expect(derived['/half']).toMatchObject({
      value: 0.215,
      rule: { id: 'half', version: '7' },
      cautions: [{ code: 'halved' }],
    });
    expect(derived['/sum']).toHaveProperty('value', expect.closeTo(1.27, 12));
  });

  it('name what they wait for, and wait for one another', () => {
    const derived = derive(cuff([140, 120], []));
    expect(derived['/meanPressure']).toMatchObject({
      missing: 'input-missing',
      names: ['/diastolic', '/systolic'],
    });
    expect(derived['/ratio']).toMatchObject({
      missing: 'input-missing',
      message: expect.stringContaining('Mean pressure') as string,
    });
    const withReason = derive({ '/tube': { missing: 'sample-unusable' } });
    expect(withReason['/half']).toMatchObject({ missing: 'input-missing', names: ['/tube'] });
  });

  it('say why there is no number', () => {
    expect(derive(cuff([80, 80, 80], [80, 80, 80]))['/ratio']).toMatchObject({
      missing: 'no-result',
      message: expect.stringContaining('finite') as string,
    });
    expect(derive({ '/tube/0': 0.71, '/tube/1': 0.71 })['/half']).toMatchObject({
      missing: 'no-result',
      message: 'whole must be below 0.7',
    });
  });

  it('warn while fewer readings count than the rule asks for', () => {
    expect(derive(cuff([140, 120], [90, 80]))['/meanPressure']).toMatchObject({
      cautions: [{ code: 'few-readings' }, { code: 'few-readings' }],
    });
  });

  it('are never taken from what was sent', () => {
    const { '/ratio': ratio } = derive({ '/meanPressure': 93 });
    expect(ratio).toMatchObject({ names: ['/meanPressure', '/systolic', '/diastolic'] });
  });
});

describe('checks', () => {
  const run = (values: EntryValues, stage: 'open' | 'complete' = 'open') =>
    checkValues(compiled, withDerived(values, derive(values)), { stage }).map(
      ({ checkId, severity, pointers }) => [checkId, severity, pointers[0]],
    );
  const whole: EntryValues = {
    ...cuff([140, 120, 120], [90, 80, 80]),
    '/tube/0': 0.45,
    '/tube/1': 0.45,
    '/tube/2': 0.45,
    '/posture': 'supine',
  };

  it('run as soon as their fields are there, on the first reading too', () => {
    expect(run(cuff([80], [90]))).toEqual([['systolic-above-diastolic', 'hard', '/systolic']]);
    expect(run({})).toEqual([]);
  });

  it('run on derived values', () => {
    expect(run(cuff([70, 70, 70], [40, 40, 40]))).toEqual([['usual', 'soft', '/meanPressure']]);
  });

  // proves DE-06
  it('ask on completion for what is required, and take a reason for an answer', () => {
    expect(run({}, 'complete')).toEqual(
      ['/systolic', '/diastolic', '/tube', '/posture'].map((pointer) => ['required', 'hard', pointer]),
    );
    expect(run(whole, 'complete')).toEqual([]);
    expect(run({ ...whole, '/posture': { missing: 'not-done' } }, 'complete')).toEqual([]);
    expect(run({ ...whole, '/posture': '' }, 'complete')).toEqual([['required', 'hard', '/posture']]);
  });

  it('ask on completion for readings that are still wanted', () => {
    const few = { ...whole, '/systolic/2!rejected': 'movement' };
    expect(run(few, 'complete')).toEqual([
      ['readings', 'hard', '/systolic'],
      ['readings', 'hard', '/diastolic'],
    ]);
    const differing = { ...whole, '/systolic/2': 130 };
    expect(run(differing, 'complete').map(([id]) => id)).toEqual(['extra-reading', 'extra-reading']);
    expect(run({ ...whole, '/systolic': { missing: 'not-done' } }, 'complete')[0]).toEqual([
      'readings',
      'hard',
      '/systolic',
    ]);
  });

  it('do not let a completed entry pass unchecked when an expression cannot be evaluated', () => {
    const two = { ...whole };
    delete two['/tube/2'];
    expect(run(two, 'open')).toEqual([]);
    expect(run(two, 'complete')).toEqual([['third-tube', 'soft', '/tube']]);
  });
});

describe('one change', () => {
  it.each<[string, Parameters<typeof operationProblem>[2], string | undefined]>([
    ['/systolic/2', 118.5, undefined],
    ['/systolic/2', null, undefined],
    ['/systolic/2!rejected', 'movement', undefined],
    ['/posture', { missing: 'not-done' }, undefined],
    ['/systolik/2', 118.5, 'no field'],
    ['/systolic', 118.5, 'row of readings'],
    ['/systolic/6', 118.5, 'at most 6'],
    ['/posture/0', 'supine', 'one value'],
    ['/systolic/2!rejected', 'too high for my taste', 'one of these reasons'],
    ['/posture', { missing: 'forgot' }, 'not one of its reasons'],
    ['/posture', '  ', 'blank'],
    ['/posture', 'a\u000bb', 'cannot be kept'],
    ['/posture', 3, 'must be text'],
    ['/age', 45.5, 'whole number'],
    ['/meanPressure', 93, 'computed'],
  ])('at %s to %j', (address, value, words) => {
    const problem = operationProblem(compiled, address, value);
    if (words === undefined) expect(problem).toBeUndefined();
    else expect(problem).toContain(words);
  });
});

describe('the document of an entry', () => {
  it('leaves out what is missing and leads back to the addresses', () => {
    const values: EntryValues = {
      '/systolic/0': 140,
      '/systolic/2': 118.5,
      '/systolic/1': { missing: 'not-done' },
      '/systolic/2!rejected': 'movement',
      '/age': 40,
    };
    const { document, addressOf } = toDocument(compiled, values);
    expect(document).toEqual({ systolic: [140, 118.5], age: 40 });
    expect(addressOf('/systolic/1')).toBe('/systolic/2');
    expect(addressOf('/age')).toBe('/age');
  });

  it('comes back as the same values', () => {
    const values: EntryValues = { '/systolic/0': 140, '/systolic/1': 118.5, '/posture': 'supine' };
    expect(toValues(compiled, toDocument(compiled, values).document)).toEqual(values);
  });
});
