import type { TestServer } from './server.ts';

export interface TrailRow {
  kind: string;
  subject: string;
  actor_id: string | null;
  role: string;
  study_id: string;
  participant_id: string | null;
  site_id: string | null;
  reason: string | null;
  /** Address → the value as recorded. */
  values: Record<string, unknown>;
}

/** The newest events of a chain, newest first, each with its recorded values and its reason in words. */
export async function newestEvents(server: TestServer, studyId: string, count = 1): Promise<TrailRow[]> {
  const rows = await server.ownerSql<TrailRow & { values: Record<string, unknown> | null }>(
    `select kind, subject, actor_id, role, study_id, participant_id, site_id,
            (select value #>> '{}' from recorded_value v where v.study_id = e.study_id and v.sequence = e.sequence
                and v.address = '/reason') as reason,
            (select jsonb_object_agg(v.subject_type || v.address, v.value) from recorded_value v
              where v.study_id = e.study_id and v.sequence = e.sequence and v.address <> '/reason') as values
       from audit_event e where study_id = $1 order by sequence desc limit $2`,
    [studyId, count],
  );
  return rows.map((row) => ({ ...row, values: row.values ?? {} }));
}

/** How many events a chain holds: unchanged by whatever is refused. */
export async function eventCount(server: TestServer, studyId?: string): Promise<number> {
  const where = studyId === undefined ? '' : 'where study_id = $1';
  const sql = `select count(*)::int as n from audit_event ${where}`;
  const [row] = await server.ownerSql<{ n: number }>(sql, studyId === undefined ? [] : [studyId]);
  return row?.n ?? 0;
}
