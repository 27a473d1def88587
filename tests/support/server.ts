import { randomBytes, randomUUID } from 'node:crypto';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { inject } from 'vitest';
import { readSettings, type Settings } from '#backend/config/settings.ts';
import type { Deps } from '#backend/http/deps.ts';
import type { RouteDeclaration } from '#backend/http/route.ts';
import type { QueueTiming } from '#backend/jobs/queue.ts';
import { openRuntime } from '#backend/runtime.ts';
import { startLocalMailBox, type LocalMailBox } from '#backend/services/local-mail-box.ts';
import { startLocalObjectStore } from '#backend/services/local-object-store.ts';
import { withClient } from '#backend/services/postgres/roles.ts';
import { listen } from '#backend/web-server.ts';
import { databaseMark } from './cluster.ts';

export interface TestServer extends Deps {
  /** Origin of the application, without a slash at the end. */
  url: string;
  /** Addresses of this file's own database. */
  ownerUrl: string;
  appUrl: string;
  routes: readonly RouteDeclaration[];
  /** Rows of a statement run as the owner, who may look at everything. */
  ownerSql: <Row extends object = Record<string, unknown>>(sql: string, params?: unknown[]) => Promise<Row[]>;
  /** Mail that arrived, oldest first. */
  mails: LocalMailBox['mails'];
  mailBox: LocalMailBox;
  stop: () => Promise<void>;
}

interface TestServerOptions {
  /** Also work on the queues; otherwise jobs stay where they were sent. */
  worker?: boolean;
  timing?: Partial<QueueTiming>;
  settings?: Partial<Settings>;
}

const briskTiming: Partial<QueueTiming> = { poll: 0.05, sweep: 0.5, grace: 2 };

/** The whole application on port 0, with a database of its own copied from the migrated template; one a test file. */
export async function startTestServer(options: TestServerOptions = {}): Promise<TestServer> {
  const { template, ...addresses } = inject('server');
  const database = `test_${process.pid}_${randomUUID().slice(0, 8)}`;
  const ownerUrl = addresses.ownerUrl.replace(databaseMark, database);
  const appUrl = addresses.appUrl.replace(databaseMark, database);
  const maintenanceUrl = addresses.ownerUrl.replace(databaseMark, 'postgres');
  await withClient(maintenanceUrl, async (client) => {
    await client.query(`create database ${database} template ${template}`);
    await client.query(`revoke all on database ${database} from public`);
    await client.query(`grant connect on database ${database} to vesselry_app`);
  });
  const folder = await mkdtemp(join(tmpdir(), 'vesselry-test-'));
  const objectStore = await startLocalObjectStore(join(folder, 'objects'));
  const mailBox = await startLocalMailBox(join(folder, 'mail'));
  const web = await listen('127.0.0.1', 0);
  const settings = { ...testSettings(web.origin, appUrl), ...options.settings };
  const runtime = await openRuntime(settings, {
    databaseUrl: appUrl,
    objectStore: objectStore.settings,
    smtpUrl: mailBox.smtpUrl,
  });
  web.serve(runtime.application.express);
  if (options.worker) await runtime.work({ ...briskTiming, ...options.timing });

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
      await rm(folder, { recursive: true, force: true });
      await withClient(maintenanceUrl, (client) => client.query(`drop database ${database} with (force)`));
    },
  };
}

function testSettings(publicUrl: string, appUrl: string): Settings {
  const secrets = new Map<string, string>();
  return readSettings({ PUBLIC_URL: publicUrl, DATABASE_URL: appUrl, LOG_LEVEL: 'silent' }, (name) => {
    const secret = secrets.get(name) ?? randomBytes(32).toString('base64url');
    secrets.set(name, secret);
    return secret;
  });
}
