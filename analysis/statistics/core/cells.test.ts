import { describe, expect, it } from 'vitest';
import { completeCells } from './cells.ts';
import { Table } from './table.ts';
import { validatePlan } from './validate-plan.ts';

const plan = (more: object = {}) =>
  validatePlan({ method: 'icc', outcome: 'v', subject: 's', condition: 'c', ...more });

describe('completeCells', () => {
  const csv = 's,c,v\nb,y,4\na,x,1\nq,other,9\na,y,2\nd,x,\nb,x,3\nd,y,7\ne,x,5\n';

  it('puts subjects in order of their first used row and drops those that lack a level', () => {
    const cells = completeCells(plan({ levels: ['x', 'y'] }), Table.ofCsv(csv));
    expect(cells.subjects).toEqual(['b', 'a']);
    expect(cells.columns.map((column) => [...column])).toEqual([
      [3, 1],
      [4, 2],
    ]);
    expect(cells.dropped).toEqual([
      { subject: 'd', reason: 'incomplete' },
      { subject: 'e', reason: 'incomplete' },
    ]);
  });

  it('refuses a second row of a cell even if it is empty, or averages what is there on the log scale', () => {
    const twice = Table.ofCsv(`${csv}a,x,\nb,y,16\n`);
    const levels = ['x', 'y'];
    expect(() => completeCells(plan({ levels }), twice)).toThrowError(
      expect.objectContaining({ code: 'duplicate_cell' }) as Error,
    );
    const cells = completeCells(plan({ levels, replicates: 'mean', transform: 'log' }), twice);
    expect(cells.columns[1]![0]).toBeCloseTo(Math.log(8), 15); // √(4·16)
    expect(cells.columns[0]![1]).toBe(0);
  });

  it('takes every level of the file without a list, and wants two', () => {
    expect(completeCells(plan(), Table.ofCsv('s,c,v\na,y,1\na,x,2\nb,x,3\nb,y,4\n')).levels).toEqual([
      'y',
      'x',
    ]);
    expect(() => completeCells(plan(), Table.ofCsv('s,c,v\na,y,1\nb,y,4\n'))).toThrowError(
      expect.objectContaining({ code: 'level_missing', fields: {} }) as Error,
    );
  });
});
