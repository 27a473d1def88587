import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { jsonPlaces, lineAndColumn, placeOf } from './json-places.ts';

const text = `{
  "title": "Trial",
  "properties": {
    "a/b": { "enum": ["x", 2.50] }
  }
}`;
const at = (pointer: string) => {
  const { from, to } = placeOf(jsonPlaces(text), pointer);
  return text.slice(from, to);
};

describe('the place of a value', () => {
  it('is the member’s name, a list item itself, or the nearest thing around what is not there', () => {
    expect(at('/title')).toBe('"title"');
    expect(at('/properties/a~1b/enum/1')).toBe('2.50');
    expect(at('/properties/a~1b/unit')).toBe('"a/b"');
    expect(at('/nowhere')).toBe('{');
    expect(lineAndColumn(text, text.indexOf('"a/b"'))).toEqual({ line: 4, column: 5 });
  });

  it('spans exactly the text of each value, for any JSON however it is spaced', () => {
    fc.assert(
      fc.property(fc.jsonValue({ depthSize: 'small' }), fc.constantFrom(0, 1, 2, '\t'), (value, space) => {
        const written = JSON.stringify(value, null, space);
        const { places, problems } = jsonPlaces(written);
        expect(problems).toEqual([]);
        for (const [pointer, { value: span }] of places) {
          const found = pointer
            .split('/')
            .slice(1)
            .reduce<unknown>(
              (here, name) =>
                (here as Record<string, unknown>)[name.replaceAll('~1', '/').replaceAll('~0', '~')],
              JSON.parse(written),
            );
          expect(JSON.parse(written.slice(span.from, span.to))).toEqual(found);
        }
      }),
      { numRuns: 300, seed: 7 },
    );
  });
});

describe('a text that is no JSON', () => {
  it.each([
    ['', 'a value', 0],
    ['{"a": }', 'a value', 6],
    ['{"a": 1,}', 'a name in double quotes', 8],
    ['{a: 1}', 'a name in double quotes', 1],
    ['{"a" 1}', ': after the name', 5],
    ['[1 2]', ', or ]', 3],
    ['{"a": "b}', 'the closing " of this text, on the same line', 6],
    ['{} x', 'nothing more', 3],
    ['[01]', ', or ]', 2],
  ])('%s says what is expected where', (broken, wanted, from) => {
    const { problems, places } = jsonPlaces(broken);
    expect(problems).toEqual([
      {
        from,
        to: Math.min(from + 1, broken.length),
        message: `This is not JSON: ${wanted} is expected here`,
      },
    ]);
    expect(places.size).toBe(0);
  });

  it('is told apart from JSON just as a parser tells it', () => {
    const parses = (written: string): boolean => {
      try {
        JSON.parse(written);
        return true;
      } catch {
        return false;
      }
    };
    const pieces = fc.array(
      fc.constantFrom(
        '{',
        '}',
        '[',
        ']',
        ',',
        ':',
        '"a"',
        '1',
        '-',
        '0',
        '.5',
        'e1',
        'null',
        ' ',
        '"',
        '\\u00',
      ),
      {
        maxLength: 8,
      },
    );
    fc.assert(
      fc.property(pieces, (parts) => {
        const written = parts.join('');
        const complained = jsonPlaces(written).problems.some(({ message }) =>
          message.startsWith('This is not JSON'),
        );
        expect(complained, written).toBe(!parses(written));
      }),
      { numRuns: 5000, seed: 11 },
    );
  });

  it('may be JSON and still lose something: a name that stands twice is named', () => {
    expect(jsonPlaces('{"a": 1, "b": 2, "a": 3}').problems).toEqual([
      { from: 17, to: 20, message: 'There are two members named a; only one can stay' },
    ]);
  });

  it('is not followed without end', () => {
    expect(jsonPlaces('['.repeat(100_000)).problems[0]?.message).toContain('less nesting');
  });
});
