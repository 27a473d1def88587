import type { RouteDeclaration } from '#backend/http/route.ts';
import type { TestServer } from './server.ts';

/** The table whose rows the parameter after this segment of a path names, and the column. */
const tables: Record<string, [table: string, column?: string]> = {
  participants: ['participant'],
  'by-code': ['participant', 'code'],
  visits: ['visit'],
  entries: ['entry'],
  queries: ['query'],
  'source-documents': ['source_document'],
  'verification-marks': ['verification_mark'],
  exports: ['export_request'],
  runs: ['run'],
  plans: ['plan_draft'],
  'instrument-versions': ['instrument_version'],
  'instrument-drafts': ['instrument_draft'],
  instruments: ['instrument_version', 'key'],
  'protocol-versions': ['protocol_version'],
};

/** Values of a path's parameters that name rows of this study; `undefined` where the study has no such row. */
export async function realIds(
  { ownerSql }: TestServer,
  { path }: RouteDeclaration,
  studyId: string,
): Promise<Record<string, string> | undefined> {
  const found: Record<string, string> = {};
  const segments = path.split('/');
  for (const [at, segment] of segments.entries()) {
    if (!segment.startsWith(':') || segment === ':studyCode') continue;
    // The second of two versions stands behind "differences"; it is one of the same kind.
    const before = segments[at - 1] === 'differences' ? segments[at - 3]! : segments[at - 1]!;
    const [table, column = 'id'] = tables[before] ?? [];
    if (table === undefined) return undefined;
    const rows = await ownerSql<{ value: string }>(
      `select ${column} as value from ${table} where study_id = $1 order by id limit 1`,
      [studyId],
    );
    if (rows[0] === undefined) return undefined;
    found[segment.slice(1)] = rows[0].value;
  }
  return found;
}
