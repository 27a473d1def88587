export interface TextRange {
  from: number;
  to: number;
}

/**
 * Where in a JSON text the value lies that a JSON Pointer names; of a property that is not there, its nearest parent.
 * Nothing when the text is no JSON up to that place.
 */
export function pointerRange(text: string, pointer: string): TextRange | undefined {
  const path = pointer === '' ? [] : pointer.slice(1).split('/').map(unescaped);
  const found: { depth: number; range: TextRange }[] = [];
  const reader = new JsonReader(text, (at, range) => {
    const matches = at.length <= path.length && at.every((name, depth) => name === path[depth]);
    if (matches) found.push({ depth: at.length, range });
  });
  reader.read();
  return found.sort((a, b) => b.depth - a.depth)[0]?.range;
}

const unescaped = (token: string) => token.replaceAll('~1', '/').replaceAll('~0', '~');

/** Walks a JSON text and reports each value with its path; stops quietly at the first error. */
class JsonReader {
  readonly #text: string;
  readonly #report: (path: readonly string[], range: TextRange) => void;
  #at = 0;
  #path: string[] = [];

  constructor(text: string, report: (path: readonly string[], range: TextRange) => void) {
    this.#text = text;
    this.#report = report;
  }

  read(): void {
    this.#value();
  }

  #value(): boolean {
    this.#space();
    const from = this.#at;
    const first = this.#text[from];
    let whole: boolean;
    if (first === '{') whole = this.#members('}', true);
    else if (first === '[') whole = this.#members(']', false);
    else if (first === '"') whole = this.#string() !== undefined;
    else whole = this.#take(/[-+.\w]+/y) !== undefined;
    // An unfinished text still has a place for what was read of it.
    if (this.#at > from) this.#report([...this.#path], { from, to: this.#at });
    return whole;
  }

  #members(close: string, named: boolean): boolean {
    this.#at += 1;
    for (let index = 0; ; index += 1) {
      this.#space();
      if (this.#text[this.#at] === close) {
        this.#at += 1;
        return true;
      }
      let name = String(index);
      if (named) {
        const key = this.#string();
        this.#space();
        if (key === undefined || this.#text[this.#at] !== ':') return false;
        this.#at += 1;
        name = key;
      }
      this.#path.push(name);
      const whole = this.#value();
      this.#path.pop();
      this.#space();
      if (!whole) return false;
      if (this.#text[this.#at] === ',') this.#at += 1;
      else if (this.#text[this.#at] !== close) return false;
    }
  }

  #string(): string | undefined {
    const raw = this.#take(/"(?:[^"\\\n]|\\.)*"/y);
    if (raw === undefined) return undefined;
    try {
      return JSON.parse(raw) as string;
    } catch {
      return undefined;
    }
  }

  #space(): void {
    this.#take(/\s+/y);
  }

  #take(pattern: RegExp): string | undefined {
    pattern.lastIndex = this.#at;
    const match = pattern.exec(this.#text)?.[0];
    if (match !== undefined) this.#at += match.length;
    return match;
  }
}
