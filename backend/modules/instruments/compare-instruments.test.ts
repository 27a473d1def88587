import { describe, expect, it } from 'vitest';
import type { FieldSchema, InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { compareInstruments, unitProblems } from './compare-instruments.ts';

const base: InstrumentSchema = {
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  instrumentKey: 'trial',
  title: 'Trial',
  type: 'object',
  additionalProperties: false,
  required: ['systolic'],
  properties: {
    systolic: { type: 'number', title: 'Systolic pressure', unit: 'mm[Hg]', maximum: 300 },
    posture: { type: 'string', title: 'Posture', enum: ['supine', 'seated'] },
    twice: { type: 'number', title: 'Twice', unit: 'mm[Hg]', derive: 'systolic * 2.0' },
  },
  checks: [
    { id: 'high', severity: 'soft', expression: 'systolic < 200.0', message: 'High', fields: ['/systolic'] },
  ],
};
const withField = (name: string, field: FieldSchema | undefined, more: Partial<InstrumentSchema> = {}) => {
  const { [name]: _old, ...rest } = base.properties;
  return { ...base, ...more, properties: field === undefined ? rest : { ...base.properties, [name]: field } };
};
const told = (after: InstrumentSchema) =>
  compareInstruments(base, after).map(
    ({ subject, aspect, kind, before, after: to, breaking }) =>
      `${subject} | ${aspect} | ${kind} | ${before} → ${to}${breaking ? ' | breaking' : ''}`,
  );

// proves IV-01
describe('the difference of two instruments', () => {
  it('is told by the field’s label and the part of it', () => {
    const systolic = { ...base.properties['systolic'], maximum: 280, title: 'Systolic' };
    expect(told(withField('systolic', systolic))).toEqual([
      'Systolic | label | changed | Systolic pressure → Systolic',
      'Systolic | largest value | changed | 300 → 280',
    ]);
  });

  it('tells new, removed and reordered fields, and changed checks', () => {
    expect(told(withField('arm', { type: 'string', title: 'Arm', enum: ['left'] }))).toEqual([
      'Arm | null | added | null → Arm, string',
    ]);
    expect(told(withField('posture', undefined))).toEqual([
      'Posture | null | removed | Posture, string → null | breaking',
    ]);
    const { systolic, posture, twice } = base.properties;
    expect(told({ ...base, properties: { posture: posture!, systolic: systolic!, twice: twice! } })).toEqual([
      'The instrument | order of the fields | reordered | ["systolic","posture","twice"] → ["posture","systolic","twice"]',
    ]);
    const [check] = base.checks!;
    expect(told({ ...base, checks: [{ ...check!, severity: 'hard' }] })).toEqual([
      'Check high | severity | changed | soft → hard',
    ]);
    expect(told({ ...base, required: [] })).toEqual([
      'The instrument | required fields | changed | ["systolic"] → []',
    ]);
  });

  it('marks what earlier values cannot be read as any more', () => {
    const unit = { ...base.properties['systolic'], unit: 'kPa' } as FieldSchema;
    expect(told(withField('systolic', unit))).toEqual([
      'Systolic pressure | unit | changed | mm[Hg] → kPa | breaking',
    ]);
  });

  // proves RB-07
  it('tells of every field that comes to reveal the condition, computed ones too', () => {
    const systolic = { ...base.properties['systolic'], unblinding: true } as FieldSchema;
    expect(told(withField('systolic', systolic))).toEqual([
      'Systolic pressure | reveals the condition | added | null → true',
      'Systolic pressure | who may see it | changed | everyone → unblinded members only',
      'Twice | who may see it | changed | everyone → unblinded members only',
    ]);
  });

  it('is empty for the same instrument', () => {
    expect(compareInstruments(base, structuredClone(base))).toEqual([]);
  });
});

// proves IV-09
describe('the unit of a published field', () => {
  it('stays, in whichever version the field last was', () => {
    const kilopascal = withField('systolic', { ...base.properties['systolic'], unit: 'kPa' });
    const gone = withField('systolic', undefined);
    expect(unitProblems([base], base)).toEqual([]);
    expect(unitProblems([base, gone], kilopascal)).toEqual([
      {
        pointer: '/properties/systolic/unit',
        message:
          '/systolic was published with mm[Hg]: a unit is part of the field, so give the new field a name of its own',
      },
    ]);
    expect(unitProblems([gone], kilopascal)).toEqual([]);
  });
});
