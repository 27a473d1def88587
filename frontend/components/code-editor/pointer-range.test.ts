import { describe, expect, it } from 'vitest';
import { pointerRange } from './pointer-range.ts';

const text =
  '{\n  "title": "Pressures, \\"rest\\"",\n  "properties": { "a/b": { "unit": "mm[Hg]" }, "list": [1, 22, {"c": null}] }\n}';
const at = (pointer: string, source = text) => {
  const range = pointerRange(source, pointer);
  return range && source.slice(range.from, range.to);
};

describe('pointerRange', () => {
  it('finds values by name, by index and through escaped names', () => {
    expect(at('/title')).toBe('"Pressures, \\"rest\\""');
    expect(at('/properties/a~1b/unit')).toBe('"mm[Hg]"');
    expect(at('/properties/list/1')).toBe('22');
    expect(at('/properties/list/2/c')).toBe('null');
    expect(at('')).toBe(text);
  });

  it('finds the nearest parent of what is not there', () => {
    expect(at('/properties/a~1b/derive')).toBe('{ "unit": "mm[Hg]" }');
  });

  it('finds the value even when a name comes twice or an earlier one begins alike', () => {
    expect(at('/ab', '{"a": 1, "ab": 2}')).toBe('2');
  });

  it('finds what stands before the first fault of an unfinished text', () => {
    expect(at('/a', '{"a": 1, "b": [2, ')).toBe('1');
    expect(pointerRange('', '/a')).toBeUndefined();
  });
});
