import { describe, expect, it } from 'vitest';
import { nameFrom, withField, withFieldMoved } from './edit-fields.ts';

const text = JSON.stringify({
  title: 'T',
  required: ['b'],
  properties: { b: { type: 'string' }, a: { type: 'number' } },
});
const read = (written: string) =>
  JSON.parse(written) as { required?: string[]; properties: Record<string, unknown> };

describe('a field added from the list', () => {
  it('stands last, under a name made of its label, and required when asked', () => {
    const { text: next, name } = withField(text, {
      label: 'Systolic pressure',
      kind: 'number',
      unit: 'mm[Hg]',
      required: true,
    });
    expect(name).toBe('systolicPressure');
    expect(Object.keys(read(next).properties)).toEqual(['b', 'a', 'systolicPressure']);
    expect(read(next).required).toEqual(['b', 'systolicPressure']);
    expect(read(next).properties['systolicPressure']).toEqual({
      type: 'number',
      title: 'Systolic pressure',
      unit: 'mm[Hg]',
    });
  });

  it('gets a name of its own whatever the label is', () => {
    expect(nameFrom('Arm', ['arm', 'arm2'])).toBe('arm3');
    expect(nameFrom('2nd look', [])).toBe('field2ndLook');
    expect(nameFrom('Überlauf (mm)', [])).toBe('uberlaufMm');
    expect(nameFrom('…', [])).toBe('field');
  });

  it('is refused where the text is no JSON, and nothing is lost', () => {
    expect(() => withField('{ "half": ', { label: 'X', kind: 'text', unit: '', required: false })).toThrow(
      SyntaxError,
    );
  });
});

describe('a field moved', () => {
  it('changes places with its neighbour, and stays at the ends', () => {
    expect(Object.keys(read(withFieldMoved(text, 'b', 1)).properties)).toEqual(['a', 'b']);
    expect(withFieldMoved(text, 'b', -1)).toBe(text);
    expect(withFieldMoved(text, 'a', 1)).toBe(text);
  });
});
