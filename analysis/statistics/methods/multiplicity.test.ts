import { describe, expect, it } from 'vitest';
import { analyse } from '../analyse.ts';
import { refusalOf } from '../testing/data.ts';

const plan = { method: 'multiplicity', outcome: 'p' };

describe('multiplicity', () => {
  it('adjusts every way by hand and leaves an empty cell null and uncounted', () => {
    const { n, tables } = analyse(plan, 'test,p\na,0.01\nb,\nc,0.04\nd,0.03\n');
    expect(n).toBe(3);
    expect(tables['adjusted']!.map((row) => row['row'])).toEqual([2, 3, 4, 5]);
    expect(tables['adjusted']!.map((row) => row['holm'])).toEqual([0.03, null, 0.06, 0.06]);
    expect(tables['adjusted']![1]).toEqual({
      row: 3,
      p_value: null,
      bonferroni: null,
      holm: null,
      hochberg: null,
      benjamini_hochberg: null,
      benjamini_yekutieli: null,
    });
  });

  it('never rejects later in a planned order than a test before it', () => {
    const { tables } = analyse({ ...plan, ordered: true }, 'p,x\n0.01,1\n0.2,1\n,1\n0.001,1\n');
    expect(tables['adjusted']!.map((row) => row['fixed_sequence'])).toEqual([0.01, 0.2, null, 0.2]);
  });

  it('passes a family only through the gate of the ones before, and an empty p-value does not close it', () => {
    const csv = 'family,p\nmain,0.01\nside,0.001\nmain,0.03\nside,\nnone,\nlast,0.0001\n';
    const { tables } = analyse({ ...plan, families: 'family' }, csv);
    // main: Holm 0.02, 0.03; side and last: at least 0.03
    expect(tables['adjusted']!.map((row) => row['gatekeeping'])).toEqual([
      0.02,
      0.03,
      0.03,
      null,
      null,
      0.03,
    ]);
  });

  it('wants a family for every row and one p-value at least', () => {
    expect(refusalOf(() => analyse({ ...plan, families: 'f' }, 'f,p\na,0.1\n,0.2\n'))).toEqual({
      code: 'missing_key',
      column: 'f',
      row: 3,
    });
    expect(refusalOf(() => analyse(plan, 'a,p\n1,\n2,\n'))).toEqual({ code: 'empty_data' });
  });
});
