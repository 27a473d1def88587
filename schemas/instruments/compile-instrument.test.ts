import { describe, expect, it } from 'vitest';
import { compileInstrument, compilePublished } from './compile-instrument.ts';
import type { FieldSchema, InstrumentCheck, InstrumentSchema } from './instrument.ts';
import type { QuantityLibrary } from './quantity-library.ts';

const library: QuantityLibrary = {
  get: (name) =>
    name === 'plasmaFraction'
      ? {
          inputs: [{ name: 'haematocrit', unit: 'L/L' }],
          unit: '1',
          version: '1',
          compute: ({ haematocrit }) => ({ value: 1 - Number(haematocrit?.value), unit: '1', cautions: [] }),
        }
      : undefined,
};

function instrument(
  properties: Record<string, FieldSchema>,
  more: Partial<InstrumentSchema> = {},
): InstrumentSchema {
  return {
    $schema: 'https://json-schema.org/draft/2020-12/schema',
    instrumentKey: 'trial',
    title: 'Trial',
    type: 'object',
    properties,
    additionalProperties: false,
    ...more,
  };
}

const number = (more: FieldSchema = {}): FieldSchema => ({
  type: 'number',
  title: 'Number',
  unit: '1',
  ...more,
});
const check = (more: Partial<InstrumentCheck>): InstrumentCheck => ({
  id: 'one',
  severity: 'hard',
  expression: 'a > 0.0',
  message: 'A must be above 0',
  fields: ['/a'],
  ...more,
});

function problemsOf(schema: InstrumentSchema) {
  const compiled = compileInstrument(schema, library);
  return 'problems' in compiled ? compiled.problems : [];
}

describe('a compiled instrument', () => {
  it('lists fields through groups and references, in reading order, and says which are required', () => {
    const compiled = compilePublished(
      instrument(
        {
          first: { $ref: '#/$defs/pressure', title: 'First' },
          group: {
            type: 'object',
            additionalProperties: false,
            required: ['inner'],
            properties: { inner: number(), other: number() },
          },
        },
        { required: ['group'], $defs: { pressure: { type: 'number', unit: 'mm[Hg]', title: 'Pressure' } } },
      ),
      library,
    );
    expect(
      compiled.fields.map(({ pointer, variable, required, label, unit }) => [
        pointer,
        variable,
        required,
        label,
        unit,
      ]),
    ).toEqual([
      ['/first', 'first', false, 'First', 'mm[Hg]'],
      ['/group/inner', 'group.inner', true, 'Number', '1'],
      ['/group/other', 'group.other', false, 'Number', '1'],
    ]);
  });

  it('computes in the order of the graph, whatever the order of the fields', () => {
    const compiled = compilePublished(
      instrument({ c: number({ derive: 'b * 2.0' }), b: number({ derive: 'a + 1.0' }), a: number() }),
      library,
    );
    expect(compiled.derivations.map(({ pointer }) => pointer)).toEqual(['/b', '/c']);
  });

  // proves RB-07
  it('spreads what unblinds along derivations, quantities, checks, conditions and readings taken together', () => {
    const compiled = compilePublished(
      instrument(
        {
          haematocrit: number({ unit: 'L/L', unblinding: true }),
          plasma: number({ derive: { quantity: 'plasmaFraction', inputs: { haematocrit: '/haematocrit' } } }),
          twice: number({ derive: 'plasma * 2.0' }),
          reason: { type: 'string', title: 'Reason', freeText: true },
          tube: { type: 'string', title: 'Tube' },
          a: number(),
        },
        {
          if: { properties: { haematocrit: { minimum: 0.6 } }, required: ['haematocrit'] },
          then: { required: ['reason'] },
          dependentRequired: { plasma: ['tube'] },
          checks: [
            check({}),
            check({ id: 'two', expression: 'a < twice' }),
            check({ id: 'three', fields: ['/plasma'] }),
          ],
        },
      ),
      library,
    );
    const hidden = compiled.fields
      .filter(({ level }) => level === 'unblinding')
      .map(({ pointer }) => pointer);
    expect(hidden).toEqual(['/haematocrit', '/plasma', '/twice', '/reason', '/tube']);
    expect(compiled.checks.map(({ id, level }) => [id, level])).toEqual([
      ['one', 'open'],
      ['two', 'unblinding'],
      ['three', 'unblinding'],
    ]);
    expect(compiled.derivations.map(({ level }) => level)).toEqual(['unblinding', 'unblinding']);
  });

  it('spreads quasi-identifiers to what is computed from them, and free text to text only', () => {
    const compiled = compilePublished(
      instrument({
        age: { type: 'integer', title: 'Age', unit: 'a', identifying: 'quasi' },
        note: { type: 'string', title: 'Note', freeText: true },
        copy: { type: 'string', title: 'Copy', derive: 'note.trim()' },
        length: { type: 'integer', title: 'Length', unit: '1', derive: 'size(note)' },
        highest: number({ derive: '220.0 - double(age)' }),
      }),
      library,
    );
    expect(compiled.visibility['/highest']).toEqual({
      identifying: 'quasi',
      unblinding: false,
      freeText: false,
    });
    expect(compiled.visibility['/copy']?.freeText).toBe(true);
    expect(compiled.visibility['/length']?.freeText).toBe(false);
  });

  it('marks every field of an instrument that is unblinding as a whole', () => {
    const compiled = compilePublished(
      instrument({ a: number(), b: number() }, { unblinding: true }),
      library,
    );
    expect(compiled.fields.every(({ level }) => level === 'unblinding')).toBe(true);
  });

  // proves IV-07
  it('tells the author of unanchored patterns, of 1.0 as an integer, of names that look like identifiers', () => {
    const { warnings } = compilePublished(
      instrument({
        code: { type: 'string', title: 'Code', pattern: '[0-9]{3}' },
        whole: { type: 'integer', title: 'Whole', unit: '1' },
        birthDate: { type: 'string', title: 'Born', format: 'date' },
      }),
      library,
    );
    expect(warnings.map(({ pointer }) => pointer)).toEqual([
      '/properties/code/pattern',
      '/properties/whole/type',
      '/properties/birthDate',
    ]);
  });
});

describe('an instrument is refused, with the place, when', () => {
  const readings: FieldSchema = {
    type: 'array',
    title: 'Pressure',
    unit: 'mm[Hg]',
    items: { type: 'number' },
    readings: {
      count: 3,
      minimum: 2,
      discardFirst: 1,
      use: { last: 2 },
      summary: 'mean',
      replaceRejected: true,
    },
  };
  const rule = (more: object): FieldSchema => ({
    ...readings,
    readings: { ...readings.readings, ...more } as FieldSchema['readings'],
  });

  it.each<[string, InstrumentSchema, string, string]>([
    [
      'derived fields go round',
      instrument({ a: number({ derive: 'b' }), b: number({ derive: 'a' }) }),
      '/properties/a/derive',
      'circle',
    ],
    [
      'an expression reads no field that exists',
      instrument({ a: number({ derive: 'bb + 1.0' }), b: number() }),
      '/properties/a/derive',
      'no field bb',
    ],
    [
      'a quantity is not in the library',
      instrument({ a: number({ derive: { quantity: 'mood', inputs: {} } }) }),
      '/properties/a/derive/quantity',
      'no quantity',
    ],
    [
      'an input has another unit',
      instrument({
        h: number({ unit: '%' }),
        a: number({ derive: { quantity: 'plasmaFraction', inputs: { haematocrit: '/h' } } }),
      }),
      '/properties/a/derive/inputs/haematocrit',
      'taken in L/L',
    ],
    [
      'a derived field has another unit than its quantity',
      instrument({
        h: number({ unit: 'L/L' }),
        a: number({ unit: '%', derive: { quantity: 'plasmaFraction', inputs: { haematocrit: '/h' } } }),
      }),
      '/properties/a/derive',
      'has the unit 1',
    ],
    [
      'an input of a quantity is missing',
      instrument({ a: number({ derive: { quantity: 'plasmaFraction', inputs: {} } }) }),
      '/properties/a/derive/inputs',
      'haematocrit (L/L) is missing',
    ],
    ['a number has no unit', instrument({ a: { type: 'number' } }), '/properties/a', 'needs a unit'],
    [
      'a derived field is required',
      instrument({ a: number(), b: number({ derive: 'a' }) }, { required: ['b'] }),
      '/properties/b/derive',
      'cannot be required',
    ],
    [
      'a required field does not exist',
      instrument({ systolic: number() }, { required: ['systolik'] }),
      '/required/0',
      'did you mean systolic',
    ],
    [
      'the root is open',
      instrument({ a: number() }, { additionalProperties: undefined }),
      '',
      'additionalProperties',
    ],
    [
      'a list is neither readings nor choices',
      instrument({ a: { type: 'array', items: { type: 'object' } } }),
      '/properties/a',
      'readings',
    ],
    [
      'a name belongs to the expression language',
      instrument({ in: number() }),
      '/properties/in',
      'another name',
    ],
    [
      'a name belongs to every object',
      instrument({ constructor: number() }),
      '/properties/constructor',
      'another name',
    ],
    [
      'a check reads no field',
      instrument({ a: number() }, { checks: [check({ expression: '1.0 > 0.0' })] }),
      '/checks/0/expression',
      'reads no field',
    ],
    [
      'a check stands at no field',
      instrument({ a: number() }, { checks: [check({ fields: ['/b'] })] }),
      '/checks/0/fields/0',
      'no field /b',
    ],
    [
      'two checks share an id',
      instrument({ a: number() }, { checks: [check({}), check({})] }),
      '/checks/1/id',
      'taken',
    ],
    [
      'a check is no yes or no',
      instrument({ a: number() }, { checks: [check({ expression: 'a' })] }),
      '/checks/0/expression',
      'true or false',
    ],
    [
      'a caution is unknown',
      instrument({ a: number() }, { cautions: ['mind-the-step'] }),
      '/cautions/0',
      'no caution',
    ],
    [
      'all readings are discarded',
      instrument({ a: rule({ discardFirst: 3 }) }),
      '/properties/a/readings/discardFirst',
      'discarded',
    ],
    [
      'more readings are needed than can count',
      instrument({ a: rule({ minimum: 3 }) }),
      '/properties/a/readings/minimum',
      'can count',
    ],
    [
      'a condition names no field',
      instrument({ a: number() }, { if: { required: ['a'] }, then: { required: ['b'] } }),
      '',
      'names /b',
    ],
    [
      'a definition holds itself',
      instrument(
        { a: { $ref: '#/$defs/node' } },
        {
          $defs: {
            node: {
              type: 'object',
              additionalProperties: false,
              properties: { a: { $ref: '#/$defs/node' } },
            },
          },
        },
      ),
      '/$defs/node/properties/a/$ref',
      'refers to itself',
    ],
    [
      'readings taken together are counted by two rules',
      instrument({ a: rule({ together: 'cuff' }), b: rule({ together: 'cuff', discardFirst: 0 }) }),
      '/properties/b/readings',
      'need the same',
    ],
  ])('%s', (_, schema, pointer, words) => {
    const [problem] = problemsOf(schema);
    expect(problem?.pointer).toBe(pointer);
    expect(problem?.message).toContain(words);
  });
});
