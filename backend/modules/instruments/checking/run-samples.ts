import type { DerivedValue } from '#schemas/instruments/derive-values.ts';
import type { EntryValue } from '#schemas/instruments/entry-values.ts';
import type { SampleEntry } from '#schemas/instruments/instrument.ts';
import type { EntryEvaluation } from './evaluate-entry.ts';

/** What came of one sample, and where it differs from what its author expects. */
export interface SampleResult {
  name: string;
  passed: boolean;
  differences: string[];
  outcome: SampleEntry['expect']['outcome'];
  checks: string[];
}

/** Runs sample values as a completed entry and compares what comes of them with what was expected (IV-03). */
export function runSamples(
  samples: SampleEntry[],
  evaluate: (sample: SampleEntry) => EntryEvaluation,
): SampleResult[] {
  return samples.map((sample) => {
    const { derived, findings } = evaluate(sample);
    const checks = [...new Set(findings.map(({ checkId }) => checkId))].sort();
    const hard = findings.some(({ severity }) => severity === 'hard');
    const outcome = hard ? 'refused' : findings.length > 0 ? 'asks' : 'passes';
    const differences: string[] = [];
    if (outcome !== sample.expect.outcome) {
      const said = findings.map(({ message }) => message).join('; ') || 'nothing was found';
      differences.push(`Expected ${sample.expect.outcome}, got ${outcome}: ${said}`);
    }
    const expected = sample.expect.checks && [...new Set(sample.expect.checks)].sort();
    if (expected && expected.join() !== checks.join()) {
      differences.push(
        `Expected the findings ${expected.join(', ') || 'none'}, got ${checks.join(', ') || 'none'}`,
      );
    }
    for (const [pointer, value] of Object.entries(sample.expect.derived ?? {})) {
      const difference = derivedDifference(pointer, value, derived[pointer]);
      if (difference) differences.push(difference);
    }
    return { name: sample.name, passed: differences.length === 0, differences, outcome, checks };
  });
}

function derivedDifference(
  pointer: string,
  expected: EntryValue | null,
  result: DerivedValue | undefined,
): string | undefined {
  const got = result && 'value' in result ? result.value : null;
  if (result === undefined) return `${pointer} is not derived`;
  if (typeof expected === 'number' && typeof got === 'number') {
    const near = Math.abs(got - expected) <= 1e-9 * Math.max(Math.abs(expected), Math.abs(got));
    return near ? undefined : `${pointer}: expected ${expected}, got ${got}`;
  }
  if (expected === got) return undefined;
  const reason = 'missing' in result ? ` (${result.message})` : '';
  return `${pointer}: expected ${JSON.stringify(expected)}, got ${JSON.stringify(got)}${reason}`;
}
