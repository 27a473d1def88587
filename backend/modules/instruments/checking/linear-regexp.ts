import { RE2JS } from 're2js';

/** A regular expression that is judged in time linear in the text, as Ajv takes it (WS-10). */
interface LinearPattern {
  test(text: string): boolean;
  toString(): string;
}

/**
 * The engine for `pattern`, given to Ajv as `code.regExp`; the browser's validator takes it by the same name.
 * `toString` is load-bearing: Ajv keys compiled patterns by it, and without it all would share the first one.
 */
export const linearRegExp = Object.assign(
  (pattern: string): LinearPattern => {
    const compiled = RE2JS.compile(pattern);
    return { test: (text) => compiled.matcher(text).find(), toString: () => `/${pattern}/u` };
  },
  { code: 'require("linear-regexp").default' },
);

/** Why a pattern cannot be used; nothing when it can. */
export function patternProblem(pattern: string): string | undefined {
  try {
    RE2JS.compile(pattern);
    return undefined;
  } catch (error) {
    const cause = error instanceof Error ? error.message : String(error);
    return `The pattern cannot be judged in bounded time (${cause}): it must do without look-around and back references`;
  }
}
