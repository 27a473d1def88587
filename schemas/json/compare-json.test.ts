import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compareJson } from './compare-json.ts';

describe('the difference of two JSON values', () => {
  it('is nothing between equal ones, however their members are ordered', () => {
    fc.assert(
      fc.property(fc.jsonValue(), (value) => {
        expect(compareJson(value, structuredClone(value))).toEqual([]);
      }),
      { numRuns: 200, seed: 3 },
    );
    expect(compareJson({ a: 1, b: { c: 2, d: 3 } }, { b: { d: 3, c: 2 }, a: 1 })).toEqual([]);
  });

  it('names what was added, removed and changed, each once and as a whole', () => {
    const before = { kept: 1, gone: { x: 1 }, deep: { list: [1, 2], word: 'old' } };
    const after = { kept: 1, deep: { list: [1, 3], word: 'new' }, made: { y: [2] } };
    expect(compareJson(before, after)).toEqual([
      { path: ['gone'], kind: 'removed', before: { x: 1 } },
      { path: ['deep', 'list'], kind: 'changed', before: [1, 2], after: [1, 3] },
      { path: ['deep', 'word'], kind: 'changed', before: 'old', after: 'new' },
      { path: ['made'], kind: 'added', after: { y: [2] } },
    ]);
  });

  it('follows named things in a list by their name and tells when they changed places', () => {
    const steps = (...list: [string, number][]) => ({
      steps: list.map(([key, minute]) => ({ key, minute })),
    });
    expect(compareJson(steps(['a', 0], ['b', 5]), steps(['x', 1], ['a', 0], ['b', 7]))).toEqual([
      { path: ['steps', 'x'], kind: 'added', after: { key: 'x', minute: 1 } },
      { path: ['steps', 'b', 'minute'], kind: 'changed', before: 5, after: 7 },
    ]);
    expect(compareJson(steps(['a', 0], ['b', 5]), steps(['b', 5], ['a', 0]))).toEqual([
      { path: ['steps'], kind: 'reordered', before: ['a', 'b'], after: ['b', 'a'] },
    ]);
    expect(compareJson(steps(['a', 0], ['a', 1]), steps(['a', 0], ['a', 2]))).toHaveLength(1);
  });

  it('sees the order of members where it says something', () => {
    const ordered = (path: readonly string[]) => path.at(-1) === 'properties';
    const before = { properties: { a: 1, b: 2 }, other: { a: 1, b: 2 } };
    const after = { properties: { b: 2, a: 1 }, other: { b: 2, a: 1 } };
    expect(compareJson(before, after, { ordered })).toEqual([
      { path: ['properties'], kind: 'reordered', before: ['a', 'b'], after: ['b', 'a'] },
    ]);
  });
});
