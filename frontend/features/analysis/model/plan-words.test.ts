import { describe, expect, it } from 'vitest';
import { planLines } from './plan-words.ts';

const words = (content: unknown, heading: string) =>
  planLines(content).find((line) => line.heading === heading)?.words;

describe('planLines', () => {
  it('reads a half-written plan and says what is missing', () => {
    expect(words({ estimand: ' ', secondary: 'hindrance' }, 'Question')).toBe('not said yet');
    expect(words({ secondary: 'hindrance' }, 'Secondary outcomes')).toBe('hindrance');
    expect(words([], 'Design')).toBe('not said yet');
  });

  it('tells the direction of the ratio and the margins of the claim', () => {
    expect(words({ conditions: ['alder', 'birch'] }, 'Compared')).toBe('alder over birch');
    const equivalence = { outcome: 'hindrance', lower: 0.8, upper: 1.25 };
    expect(words({ equivalence }, 'Equivalence')).toMatch(/tone part.*between 0\.8 and 1\.25/);
  });
});
