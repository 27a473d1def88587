import { Problem } from './problem.ts';

/** Query members of every list: a cursor that the last page gave, and how many rows. */
export const pageQuery = {
  cursor: { type: 'string', maxLength: 400 },
  limit: { type: 'string', pattern: '^[1-9][0-9]{0,2}$' },
} as const;

/** JSON Schema of a list's answer. */
export const listOf = (item: object): object => ({
  type: 'object',
  required: ['items', 'nextCursor'],
  properties: { items: { type: 'array', items: item }, nextCursor: { type: ['string', 'null'] } },
});

/** A cursor is the sort key of the last row, opaque to callers. */
export const toCursor = (key: readonly (string | number)[]): string =>
  Buffer.from(JSON.stringify(key)).toString('base64url');

/** Reads a cursor back; 400 for one we did not make. */
export function fromCursor(cursor: string | undefined, length: number): (string | number)[] | null {
  if (cursor === undefined) return null;
  try {
    const key: unknown = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'));
    const good = Array.isArray(key) && key.length === length;
    if (good && key.every((part) => typeof part === 'string' || typeof part === 'number')) {
      return key;
    }
  } catch {
    // Falls through to the refusal: what cannot be read was not made here.
  }
  throw new Problem(400, 'invalid-parameter', 'This cursor is not from this list; start again without one.');
}

/** Rows a page holds when the caller does not say; 200 at most. */
export const pageSize = (limit: string | undefined): number => Math.min(Number(limit ?? 50), 200);
