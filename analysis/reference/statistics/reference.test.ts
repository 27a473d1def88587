import { existsSync, readFileSync, readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { analyse } from '../../statistics/analyse.ts';
import { AnalysisError } from '../../statistics/core/analysis-error.ts';
import type { Result, Row } from '../../statistics/core/result.ts';

const ownCases = new URL('./cases/', import.meta.url);
/** The larger set stands beside the checkout and is not part of the project. */
const sharedCases = new URL('../../../../shared/reference/statistics/', import.meta.url);
const sharedCount = 61;

describe('analyse on published data with values from R', () => {
  it.each(caseFolders(ownCases))('%s', (name) => {
    expect(differencesOfCase(ownCases, name)).toEqual([]);
  });
});

describe('analyse on the reference set beside the checkout', () => {
  const found = caseFolders(sharedCases);

  it('finds its cases', ({ skip }) => {
    if (found.length === 0)
      skip(`${sharedCount} reference cases could not be found, as they are not part of the project`);
    expect(found.length).toBeGreaterThanOrEqual(sharedCount);
  });

  it.each(found)('%s', (name) => {
    expect(differencesOfCase(sharedCases, name)).toEqual([]);
  });
});

interface Tolerance {
  relative: number;
  absolute: number;
}

/** Content of a case's expected.json. */
interface Expected {
  exit_code: 0 | 2;
  result?: Pick<Result, 'method' | 'n' | 'dropped' | 'estimates' | 'tables'>;
  error?: Record<string, unknown>;
  required_warnings?: string[];
  tolerance?: { estimates?: Record<string, Tolerance>; tables?: Record<string, Record<string, Tolerance>> };
}

/** Folders of cases below a folder; empty when it is not there. */
function caseFolders(root: URL): string[] {
  if (!existsSync(root)) return [];
  return readdirSync(root, { withFileTypes: true })
    .filter((entry) => entry.isDirectory() && !/^[._]/.test(entry.name))
    .map((entry) => entry.name)
    .sort();
}

/** What differs between the expected and the actual answer of one case; empty when it passes. */
function differencesOfCase(root: URL, name: string): string[] {
  const read = (file: string) => readFileSync(new URL(`${name}/${file}`, root), 'utf8');
  const csv = existsSync(new URL(`${name}/data.csv`, root)) ? read('data.csv') : null;
  const expected = JSON.parse(read('expected.json')) as Expected;
  const plan: unknown = JSON.parse(read('plan.json'));
  const { error, result } = run(plan, csv);
  if (expected.error) return differencesOfError(expected.error, error);
  if (!result || !expected.result) return [`expected a result, got ${JSON.stringify(error)}`];
  return differencesOfResult(expected, expected.result, result);
}

function run(plan: unknown, csv: string | null): { result?: Result; error?: Record<string, unknown> } {
  try {
    return { result: analyse(plan, csv) };
  } catch (error) {
    if (error instanceof AnalysisError) return { error: { ...error.toJSON().error } };
    throw error;
  }
}

function differencesOfError(expected: Record<string, unknown>, got: Record<string, unknown> = {}): string[] {
  const { message: _, ...rest } = got;
  return JSON.stringify(sorted(rest)) === JSON.stringify(sorted(expected))
    ? []
    : [`error: got ${JSON.stringify(got)}, expected ${JSON.stringify(expected)}`];
}

function sorted(object: Record<string, unknown>): [string, unknown][] {
  return Object.entries(object).sort(([a], [b]) => (a < b ? -1 : 1));
}

function differencesOfResult(
  { tolerance, required_warnings = [] }: Expected,
  expected: NonNullable<Expected['result']>,
  got: Result,
): string[] {
  const found: string[] = [];
  if (got.method !== expected.method || got.n !== expected.n)
    found.push(`method or n: ${got.method}, ${got.n}`);
  if (JSON.stringify(got.dropped) !== JSON.stringify(expected.dropped)) {
    found.push(`dropped: ${JSON.stringify(got.dropped)}`);
  }
  found.push(...differencesOfRow('estimates', got.estimates, expected.estimates, tolerance?.estimates));
  for (const [table, rows] of Object.entries(expected.tables)) {
    const mine = got.tables[table] ?? [];
    if (mine.length !== rows.length) found.push(`${table}: ${mine.length} rows, not ${rows.length}`);
    rows.forEach((row, i) => {
      found.push(...differencesOfRow(`${table}[${i}]`, mine[i] ?? {}, row, tolerance?.tables?.[table]));
    });
  }
  const codes: string[] = got.warnings.map((warning) => warning.code);
  for (const code of required_warnings) if (!codes.includes(code)) found.push(`warning ${code} is missing`);
  return found;
}

function differencesOfRow(
  place: string,
  got: Row,
  expected: Row,
  tolerances: Record<string, Tolerance> = {},
): string[] {
  return Object.entries(expected).flatMap(([key, wanted]) => {
    const value = got[key];
    if (typeof wanted === 'number' && typeof value === 'number') {
      const { relative, absolute } = tolerances[key] ?? { relative: 0, absolute: 0 };
      if (Math.abs(value - wanted) <= relative * Math.abs(wanted) + absolute) return [];
    } else if (value === wanted) return [];
    return [`${place}.${key}: got ${value}, expected ${wanted}`];
  });
}
