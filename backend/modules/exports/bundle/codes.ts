import { randomInt } from 'node:crypto';

const letters = 'ABCDEFGHJKLMNPQRSTUVWXYZ23456789';

/**
 * Codes for one export: random, new each time, computed from nothing, and not kept anywhere (DX-08).
 * Rows are later put in the order of these codes, so that order says nothing either (DX-09).
 */
export class ExportCodes {
  readonly #prefix: string;
  readonly #known = new Map<string, string>();
  readonly #taken = new Set<string>();

  constructor(prefix: string) {
    this.#prefix = prefix;
  }

  of(original: string): string {
    const known = this.#known.get(original);
    if (known !== undefined) return known;
    for (;;) {
      const code =
        this.#prefix + Array.from({ length: 6 }, () => letters[randomInt(letters.length)]).join('');
      if (this.#taken.has(code)) continue;
      this.#taken.add(code);
      this.#known.set(original, code);
      return code;
    }
  }
}
