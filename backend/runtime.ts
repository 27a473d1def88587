import pg from 'pg';
import { buildApplication, type Application } from './app.ts';
import type { ObjectStoreSettings } from './config/setting-groups.ts';
import type { Settings } from './config/settings.ts';
import { connect } from './database/orm.ts';
import type { Deps } from './http/deps.ts';
import { logger, stackOf } from './http/logger.ts';
import type { QueueTiming } from './jobs/queue.ts';
import { openMailer } from './services/mail.ts';
import { openObjectStore } from './services/object-store.ts';
import { startWorker } from './worker.ts';

/** The servers that the application works with, ours or given. */
export interface Services {
  databaseUrl: string;
  objectStore: ObjectStoreSettings;
  smtpUrl: string;
}

export interface Runtime {
  deps: Deps;
  application: Application;
  /** Begins to work on the queues in this process. */
  work: (timing?: Partial<QueueTiming>) => Promise<void>;
  close: () => Promise<void>;
}

/** Opens everything that the application is built from, and builds it; `main` and the tests share this wiring. */
export async function openRuntime(settings: Settings, services: Services): Promise<Runtime> {
  logger.level = settings.logLevel;
  const { databaseUrl } = services;
  const orm = await connect(databaseUrl);
  const pool = new pg.Pool({ connectionString: databaseUrl, max: 10, application_name: 'vesselry web' });
  pool.on('error', (error) => logger.error({ error: stackOf(error) }, 'an idle database connection broke'));
  const objectStore = openObjectStore(services.objectStore);
  const mailer = openMailer({ smtpUrl: services.smtpUrl, from: settings.mail.from });
  const deps: Deps = { orm, pool, settings, objectStore };
  let stopWorker = () => Promise.resolve();
  return {
    deps,
    application: buildApplication(deps),
    work: async (timing) => {
      const queue = await startWorker(databaseUrl, { ...deps, mailer }, timing);
      stopWorker = queue.stop;
    },
    close: async () => {
      await stopWorker();
      mailer.close();
      objectStore.close();
      await pool.end();
      await orm.close(true);
    },
  };
}
