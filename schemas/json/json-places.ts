/** A part of a text: from the first character to behind the last. */
export interface Span {
  from: number;
  to: number;
}

/** Where a value stands, and for a member of an object also its name. */
interface Place {
  value: Span;
  name?: Span;
}

/** A place at which the text is no JSON, or not the JSON its author means. */
interface TextProblem extends Span {
  message: string;
}

export interface JsonPlaces {
  /** JSON Pointer → place; empty when the text is no JSON. */
  places: ReadonlyMap<string, Place>;
  /** The first thing that is no JSON, or each name that stands twice in one object. */
  problems: TextProblem[];
}

/** What lies deeper is not looked at: whoever reads the text has bounds of their own. */
const deepest = 100;

/**
 * Finds where each value of a JSON text stands, so that a problem at a pointer is shown at its place.
 * A name given twice is a problem here: a parser keeps the last one and drops the other without a word.
 */
export function jsonPlaces(text: string): JsonPlaces {
  const places = new Map<string, Place>();
  const problems: TextProblem[] = [];
  let at = 0;

  const blanks = /[ \t\n\r]*/y;
  const skipBlanks = (): void => {
    blanks.lastIndex = at;
    at += blanks.exec(text)?.[0].length ?? 0;
  };
  const take = (expression: RegExp): Span | undefined => {
    expression.lastIndex = at;
    const found = expression.exec(text);
    if (found === null) return undefined;
    const span = { from: at, to: at + found[0].length };
    at = span.to;
    return span;
  };
  const expect = (character: string, wanted: string): void => {
    skipBlanks();
    if (text[at] !== character) throw new NotJson(wanted);
    at += 1;
  };

  const readValue = (pointer: string, depth: number, name?: Span): void => {
    if (depth > deepest) throw new NotJson(`less nesting: more than ${deepest} levels are not read`);
    skipBlanks();
    const from = at;
    if (text[at] === '{') readObject(pointer, depth);
    else if (text[at] === '[') readList(pointer, depth);
    else if (
      take(stringToken) === undefined &&
      take(numberToken) === undefined &&
      take(wordToken) === undefined
    ) {
      throw new NotJson(text[at] === '"' ? 'the closing " of this text, on the same line' : 'a value');
    }
    places.set(pointer, { value: { from, to: at }, ...(name === undefined ? {} : { name }) });
  };

  const readObject = (pointer: string, depth: number): void => {
    at += 1;
    skipBlanks();
    if (text[at] === '}') return void (at += 1);
    const seen = new Set<string>();
    for (;;) {
      skipBlanks();
      const name = take(stringToken);
      if (name === undefined) throw new NotJson('a name in double quotes');
      const key = JSON.parse(text.slice(name.from, name.to)) as string;
      if (seen.has(key))
        problems.push({ ...name, message: `There are two members named ${key}; only one can stay` });
      seen.add(key);
      expect(':', ': after the name');
      readValue(`${pointer}/${escaped(key)}`, depth + 1, name);
      skipBlanks();
      if (text[at] === '}') return void (at += 1);
      expect(',', ', or }');
    }
  };

  const readList = (pointer: string, depth: number): void => {
    at += 1;
    skipBlanks();
    if (text[at] === ']') return void (at += 1);
    for (let index = 0; ; index += 1) {
      readValue(`${pointer}/${index}`, depth + 1);
      skipBlanks();
      if (text[at] === ']') return void (at += 1);
      expect(',', ', or ]');
    }
  };

  try {
    readValue('', 0);
    skipBlanks();
    if (at < text.length) throw new NotJson('nothing more');
    return { places, problems };
  } catch (error) {
    if (!(error instanceof NotJson)) throw error;
    const place = { from: Math.min(at, Math.max(0, text.length - 1)), to: Math.min(at + 1, text.length) };
    return {
      places: new Map(),
      problems: [{ ...place, message: `This is not JSON: ${error.message} is expected here` }],
    };
  }
}

/** Where to show a problem at this pointer: the member's name, else the value, else the nearest thing around it. */
export function placeOf({ places }: JsonPlaces, pointer: string): Span {
  for (let here = pointer; here !== ''; here = here.slice(0, here.lastIndexOf('/'))) {
    const place = places.get(here);
    if (place !== undefined) return place.name ?? place.value;
  }
  const root = places.get('')?.value.from ?? 0;
  return { from: root, to: root + 1 };
}

/** Line and column of a position, both counted from 1. */
export function lineAndColumn(text: string, position: number): { line: number; column: number } {
  const before = text.slice(0, position);
  return { line: before.split('\n').length, column: position - before.lastIndexOf('\n') };
}

class NotJson extends Error {}

// JSON forbids exactly these control characters inside a text.
// eslint-disable-next-line no-control-regex
const stringToken = /"(?:[^"\\\u0000-\u001f]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*"/y;
const numberToken = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?/y;
const wordToken = /true|false|null/y;

const escaped = (name: string): string => name.replaceAll('~', '~0').replaceAll('/', '~1');
