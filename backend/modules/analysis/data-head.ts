import type { EntityManager } from '@mikro-orm/postgresql';

/** Kinds of act that change nothing a cut holds: asking for one must not alter the next. */
const withoutData = [
  'cut-requested',
  'cut-made',
  'run-requested',
  'run-finished',
  'job-cancelled',
  'plan-drafted',
  'plan-signed',
  'export-requested',
  'export-approved',
  'export-refused',
  'export-built',
  'export-downloaded',
  'identifiers-read',
];

/** The newest event that changed data: up to it a cut holds. */
export async function dataHead(
  em: EntityManager,
  studyId: string,
): Promise<{ sequence: number; hash: string; at: string }> {
  const [row] = await em.execute<{ sequence: string; hash: string; at: string }[]>(
    `select sequence, encode(hash, 'hex') as hash, to_char(at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as at
       from audit_event where study_id = ? and not (kind = any(?::text[]))
      order by sequence desc limit 1`,
    [studyId, `{${withoutData.join(',')}}`],
  );
  if (row === undefined) throw new Error('The study has no event yet.');
  return { sequence: Number(row.sequence), hash: row.hash, at: row.at };
}
