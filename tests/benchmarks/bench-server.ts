import { randomBytes } from 'node:crypto';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { readSettings } from '#backend/config/settings.ts';
import { prepareDatabase } from '#backend/prepare-database.ts';
import { openRuntime } from '#backend/runtime.ts';
import { startLocalMailBox } from '#backend/services/local-mail-box.ts';
import { startLocalObjectStore } from '#backend/services/local-object-store.ts';
import { ensureDatabase, withClient } from '#backend/services/postgres/roles.ts';
import { startThrowAwayCluster } from '#backend/services/postgres/throw-away.ts';
import { listen } from '#backend/web-server.ts';
import type { TestServer } from '../support/server.ts';

const database = 'vesselry_benchmark';

/** The whole application on a cluster of its own, outside the test runner; `stop` leaves nothing behind. */
export async function startBenchServer(): Promise<TestServer> {
  const cluster = await startThrowAwayCluster();
  await withClient(cluster.ownerUrl('postgres'), (client) => ensureDatabase(client, database));
  const [ownerUrl, appUrl] = [cluster.ownerUrl(database), cluster.appUrl(database)];
  await prepareDatabase(ownerUrl);
  const folder = await mkdtemp(join(tmpdir(), 'vesselry-benchmark-'));
  const objectStore = await startLocalObjectStore(join(folder, 'objects'));
  const mailBox = await startLocalMailBox(join(folder, 'mail'));
  const web = await listen('127.0.0.1', 0);
  const secrets = new Map<string, string>();
  const settings = readSettings(
    { PUBLIC_URL: web.origin, DATABASE_URL: appUrl, LOG_LEVEL: 'silent' },
    (name) => {
      const secret = secrets.get(name) ?? randomBytes(32).toString('base64url');
      secrets.set(name, secret);
      return secret;
    },
  );
  const runtime = await openRuntime(settings, {
    databaseUrl: appUrl,
    objectStore: objectStore.settings,
    smtpUrl: mailBox.smtpUrl,
  });
  web.serve(runtime.application.express);
  return {
    ...runtime.deps,
    url: web.origin,
    ownerUrl,
    appUrl,
    routes: runtime.application.routes,
    ownerSql: async <Row extends object>(sql: string, params: unknown[] = []) =>
      withClient(ownerUrl, async (client) => (await client.query<Row>(sql, params)).rows),
    mails: mailBox.mails,
    mailBox,
    stop: async () => {
      await web.close();
      await runtime.close();
      await mailBox.stop();
      await objectStore.stop();
      await cluster.remove();
      await rm(folder, { recursive: true, force: true });
    },
  };
}
