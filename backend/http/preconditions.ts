import type { Request } from 'express';
import { Problem } from './problem.ts';

/** The strong ETag of a revision. */
export const etag = (revision: number): string => `"${revision}"`;

/** The revision that `If-Match` names; 428 without one, 400 for a weak or foreign tag. */
export function ifMatch(request: Request): number {
  const header = request.get('If-Match');
  if (header === undefined) {
    throw new Problem(428, 'revision-missing', 'Send If-Match with the revision you saw.');
  }
  const match = /^"(\d{1,9})"$/.exec(header);
  if (match === null) {
    throw new Problem(400, 'invalid-parameter', 'If-Match must be one strong tag, as it was given in ETag.');
  }
  return Number(match[1]);
}

/** 412 unless the row is still at the revision that was seen. */
export function assertRevision(
  row: { revision: number },
  seen: number,
  extra: Record<string, unknown> = {},
): void {
  if (row.revision === seen) return;
  throw new Problem(412, 'stale-revision', 'Someone changed this meanwhile; load it again and compare.', [], {
    currentRevision: row.revision,
    ...extra,
  });
}
