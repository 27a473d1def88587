import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { act, systemChain } from '#backend/database/act.ts';
import { SiteSchema } from '#backend/modules/studies/site.entity.ts';
import { StudySchema, type Study } from '#backend/modules/studies/study.entity.ts';
import { acting, theSystem } from '../support/acting.ts';
import { startTestServer, type TestServer } from '../support/server.ts';

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());

const asSystem = <T>(work: () => Promise<T>): Promise<T> => acting(server.orm, theSystem, work);

const newStudy = (code: string): Promise<Study> =>
  asSystem(() =>
    act(
      server.orm.em,
      {
        kind: 'study-created',
        subject: (row: Study) => ({ type: 'study', id: row.id }),
        studyId: systemChain,
      },
      async (tx) => tx.create(StudySchema, { code, name: code.toUpperCase(), title: 'An invented study' }),
    ),
  );

const eventsOf = (studyId: string) =>
  server.ownerSql<{
    sequence: string;
    kind: string;
    changes: { address: string; old: string | null; new: string }[];
    hash: string;
    previous: string;
  }>(
    `select sequence, kind, changes, encode(hash, 'hex') as hash, encode(previous_hash, 'hex') as previous
       from audit_event where study_id = $1 order by sequence`,
    [studyId],
  );

describe('an act', () => {
  // proves AT-01
  it('writes one event with the old and the new commitment of each changed address', async () => {
    const study = await newStudy('one-event');
    await asSystem(() =>
      act(
        server.orm.em,
        {
          kind: 'study-changed',
          subject: { type: 'study', id: study.id },
          studyId: systemChain,
          reason: 'A better name',
        },
        async (tx) => {
          (await tx.findOneOrFail(StudySchema, study.id)).name = 'Renamed';
        },
      ),
    );
    const events = (await eventsOf(systemChain)).slice(-2);
    expect(events.map(({ kind }) => kind)).toEqual(['study-created', 'study-changed']);
    const [created, changed] = events;
    const [change] = changed?.changes ?? [];
    expect(changed?.changes).toHaveLength(1);
    expect(change?.address).toBe('/name');
    expect(change?.old).toBe(created?.changes.find(({ address }) => address === '/name')?.new);
    expect(changed?.previous).toBe(created?.hash);
    const reasons = await server.ownerSql<{ value: string }>(
      `select value #>> '{}' as value from recorded_value where subject_id = $1 and address = '/reason'`,
      [study.id],
    );
    expect(reasons).toEqual([{ value: 'A better name' }]);
  });

  // proves AT-05
  it('leaves neither change nor event when the event cannot be written', async () => {
    const study = await newStudy('no-half');
    const before = await eventsOf(systemChain);
    const failing = asSystem(() =>
      act(
        server.orm.em,
        { kind: 'study-changed', subject: { type: 'study', id: 'not-a-subject' }, studyId: 'not-a-uuid' },
        async (tx) => {
          (await tx.findOneOrFail(StudySchema, study.id)).name = 'Never';
        },
      ),
    );
    await expect(failing).rejects.toThrow();
    const [row] = await server.ownerSql<{ name: string; revision: number }>(
      'select name, revision from study where id = $1',
      [study.id],
    );
    expect(row).toEqual({ name: 'NO-HALF', revision: 1 });
    expect(await eventsOf(systemChain)).toEqual(before);
  });

  it('leaves no event when its work fails after a flush', async () => {
    const before = await eventsOf(systemChain);
    const failing = asSystem(() =>
      act(
        server.orm.em,
        { kind: 'study-created', subject: { type: 'study', id: systemChain }, studyId: systemChain },
        async (tx) => {
          tx.create(StudySchema, { code: 'gone', name: 'Gone', title: 'x' });
          await tx.flush();
          throw new Error('planned');
        },
      ),
    );
    await expect(failing).rejects.toThrow('planned');
    expect(await server.ownerSql(`select id from study where code = 'gone'`)).toEqual([]);
    expect(await eventsOf(systemChain)).toEqual(before);
  });

  it('refuses a change outside it, a second one inside it, and one of another study', async () => {
    const study = await newStudy('guarded');
    await asSystem(async () => {
      const row = await server.orm.em.findOneOrFail(StudySchema, study.id);
      row.name = 'Outside';
      await expect(server.orm.em.flush()).rejects.toThrow('changed outside act()');
    });
    await asSystem(async () => {
      const about = { kind: 'study-changed', subject: { type: 'study', id: study.id }, studyId: systemChain };
      await expect(
        act(server.orm.em, about, () => act(server.orm.em, about, async () => undefined)),
      ).rejects.toThrow('inside another');
      const other = act(server.orm.em, { ...about, studyId: systemChain }, async (tx) =>
        tx.create(SiteSchema, { studyId: study.id, code: 'XX', name: 'Elsewhere', timeZone: 'UTC' }),
      );
      await expect(other).rejects.toThrow('of another study');
    });
  });

  // proves AT-10
  it('keeps one chain without gap or fork under fifty parallel writers', async () => {
    const study = await newStudy('parallel');
    await Promise.all(
      Array.from({ length: 50 }, (_, index) =>
        asSystem(() =>
          act(
            server.orm.em,
            {
              kind: 'site-added',
              subject: (row: { id: string }) => ({ type: 'site', id: row.id }),
              studyId: study.id,
            },
            async (tx) =>
              tx.create(SiteSchema, {
                studyId: study.id,
                code: String.fromCharCode(65 + Math.floor(index / 26), 65 + (index % 26)),
                name: `Site ${index}`,
                timeZone: 'UTC',
              }),
          ),
        ),
      ),
    );
    const events = await eventsOf(study.id);
    expect(events.map(({ sequence }) => Number(sequence))).toEqual(
      Array.from({ length: 50 }, (_, index) => index + 1),
    );
    events.slice(1).forEach((event, index) => expect(event.previous).toBe(events[index]?.hash));
  });
});

describe('the application’s database role', () => {
  // proves AT-04
  it.each([
    'audit_event',
    'audit_event_p0',
    'recorded_value',
    'entry_revision',
    'signature',
    'cut',
    'protocol_version',
    'instrument_version',
    'plan_version',
    'study_lock',
    'check_outcome',
    'query_message',
  ])('cannot update, delete or truncate %s', async (table) => {
    await newStudy(`rights-${table.replaceAll('_', '-')}`);
    const em = server.orm.em.fork();
    const key = 'study_id';
    for (const sql of [`update ${table} set ${key} = ${key}`, `delete from ${table}`, `truncate ${table}`]) {
      await expect(em.execute(sql), sql).rejects.toThrow(/permission denied/);
    }
  });

  // proves AC-09
  it('owns nothing, makes nothing, and deletes no study data', async () => {
    const em = server.orm.em.fork();
    expect(await em.execute(`select tablename from pg_tables where tableowner = current_user`)).toEqual([]);
    await expect(em.execute('create table mine (id int)')).rejects.toThrow(/permission denied/);
    await expect(em.execute('delete from entry')).rejects.toThrow(/permission denied/);
    await expect(em.execute('delete from participant')).rejects.toThrow(/permission denied/);
    await expect(em.execute('alter table audit_event disable trigger all')).rejects.toThrow(/must be owner/);
  });

  it('is refused by triggers even as the owner, on partitions too', async () => {
    for (const sql of [
      'update audit_event set kind = kind',
      'truncate audit_event',
      'truncate audit_event_p3',
      'truncate recorded_value_p1',
      `update recorded_value set value = '1'`,
    ]) {
      await expect(server.ownerSql(sql), sql).rejects.toThrow(/only grows|emptied by redaction/);
    }
  });
});
