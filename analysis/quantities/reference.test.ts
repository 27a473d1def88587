import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import algebra from '../reference/haemodynamics/algebra.json' with { type: 'json' };
import published from '../reference/haemodynamics/published.json' with { type: 'json' };
import viscosityTable from '../reference/haemodynamics/viscosity-table.json' with { type: 'json' };
import { convert } from '../units/convert.ts';
import type { GivenInput } from './inputs.ts';
import { derive, quantities } from './registry.ts';

interface SharedCase {
  id: string;
  quantity: string;
  inputs: Record<string, GivenInput>;
  expected: { value?: number; unit?: string; error?: unknown };
  rel_tol: number;
}

interface OwnCase {
  quantity: string;
  inputs: Record<string, GivenInput>;
  expected: { value: number; unit: string };
  relative_tolerance: number;
  source: string;
}

const sharedFile = new URL('../../../shared/reference/haemodynamics/cases.json', import.meta.url);
const shared = existsSync(sharedFile) ? (JSON.parse(readFileSync(sharedFile, 'utf8')) as SharedCase[]) : [];

const own = [...published, ...algebra] as unknown as OwnCase[];

describe('published numbers and hand algebra', () => {
  it('cover every quantity', () => {
    const covered = new Set([...own, ...viscosityTable.rows].map(({ quantity }) => quantity));
    expect([...quantities.keys()].filter((key) => !covered.has(key))).toEqual([]);
  });

  it.each(own.map((each) => ({ ...each, title: `${each.quantity}: ${each.source}` })))(
    '$title',
    ({ quantity, inputs, expected, relative_tolerance }) => {
      const derived = derive(quantity, inputs);
      const value = convert(derived.value, derived.unit, expected.unit);
      expect(Math.abs(value - expected.value)).toBeLessThanOrEqual(
        relative_tolerance * Math.abs(expected.value),
      );
    },
  );

  it.each(
    viscosityTable.rows.map((row) => ({ ...row, title: `${row.quantity} ${JSON.stringify(row.inputs)}` })),
  )(
    'table of laws over haematocrit: $title',
    ({ quantity, inputs, haematocrit_input, haematocrit_percent, values }) => {
      values.forEach((value, index) => {
        if (value === null) return;
        const given = { ...inputs, [haematocrit_input]: { value: haematocrit_percent[index]!, unit: '%' } };
        const derived = derive(quantity, given as unknown as Record<string, GivenInput>).value;
        expect(Math.abs(derived - value), `${haematocrit_percent[index]} %`).toBeLessThan(
          viscosityTable.absolute_tolerance,
        );
      });
    },
  );
});

describe('shared reference cases', () => {
  it.runIf(shared.length === 0)('were not found beside this clone: 135 cases not run', () => {
    expect(existsSync(sharedFile)).toBe(false);
  });

  it.runIf(shared.length > 0)('are all there and name known quantities', () => {
    expect(shared.length).toBeGreaterThanOrEqual(135);
    expect(shared.filter(({ quantity }) => !quantities.has(quantity)).map(({ id }) => id)).toEqual([]);
  });

  it.each(shared)('$id', ({ quantity, inputs, expected, rel_tol }) => {
    if (expected.error !== undefined) {
      expect(() => derive(quantity, inputs)).toThrow();
      return;
    }
    const { value, unit } = derive(quantity, inputs);
    expect(unit).toBe(expected.unit);
    expect(Math.abs(value - expected.value!)).toBeLessThanOrEqual(rel_tol * Math.abs(expected.value!));
  });
});
