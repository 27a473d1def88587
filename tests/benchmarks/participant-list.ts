import pg from 'pg';
import { expectStatus } from '../support/capture-builders.ts';
import { aStudyWithEntries } from './a-study-with-entries.ts';
import { startBenchServer } from './bench-server.ts';
import { ms, printTable, ratio, repeated, spread } from './measure.ts';

/**
 * All of a study's 1,000 participants, read page by page as the list does, against the statements it sends, by `pg`
 * alone, plus as many requests that do nothing but know who asks.
 *
 * `node --import tsx tests/benchmarks/participant-list.ts`
 */
const participants = 1000;
const page = 200;
const times = 40;

const server = await startBenchServer();
const pool = new pg.Pool({ connectionString: server.appUrl, max: 1 });
try {
  const { studyId, siteId, path, coordinator } = await aStudyWithEntries(server, 1);
  await server.ownerSql(
    `insert into participant (id, study_id, site_id, code, state, enrolled_on, protocol_version_id, revision)
     select gen_random_uuid(), $1, $2, 'AA-' || lpad((n + 1000)::text, 5, '0'), 'screening', current_date,
            (select protocol_version_id from participant where study_id = $1 limit 1), 1
       from generate_series(1, $3) as n`,
    [studyId, siteId, participants - 1],
  );
  const list = async () => {
    let cursor: string | null = '';
    let seen = 0;
    while (cursor !== null) {
      const query: string = cursor === '' ? '' : `&cursor=${cursor}`;
      const answer = await coordinator.client.get<{ items: unknown[]; nextCursor: string | null }>(
        `${path}/participants?limit=${page}${query}`,
      );
      expectStatus(answer, 200);
      seen += answer.body.items.length;
      cursor = answer.body.nextCursor;
    }
    if (seen !== participants) throw new Error(`The list held ${seen} participants.`);
  };
  const sql = async () => {
    for (let after = ''; ;) {
      const { rows } = await pool.query<{ id: string; code: string }>(
        'select * from participant where study_id = $1 and code > $2 order by code limit $3',
        [studyId, after, page],
      );
      if (rows.length === 0) return;
      const ids = [rows.map(({ id }) => id)];
      await pool.query('select * from site where id = $1', [siteId]);
      await pool.query(
        'select participant_id, assigned_at from allocation_slot where participant_id = any($1::uuid[])',
        ids,
      );
      await pool.query(
        `select participant_id, (count(*) filter (where state = 'completed'))::int as completed,
                (count(*) filter (where state = 'missed'))::int as missed, count(*)::int as planned
           from visit where participant_id = any($1::uuid[]) group by participant_id`,
        ids,
      );
      await pool.query('select * from emergency_opening where participant_id = any($1::uuid[])', ids);
      after = rows.at(-1)!.code;
    }
  };
  const empty = async () => {
    for (let done = 0; done < participants / page; done += 1) {
      expectStatus(await coordinator.client.get('/session'), 200);
    }
  };
  const own = spread(await repeated(times, list)).median;
  const bare = spread(await repeated(times, sql)).median;
  const request = spread(await repeated(times, empty)).median;
  console.log(`${participants} participants in pages of ${page}`);
  printTable(
    ['what', 'median', 'product / it'],
    [
      ['list', ms(own), ''],
      ['its statements', ms(bare), ratio(own / bare)],
      ['empty requests', ms(request), ratio(own / request)],
      ['both together', ms(bare + request), ratio(own / (bare + request))],
    ],
  );
} finally {
  await pool.end();
  await server.stop();
}
