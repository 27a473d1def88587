import type { RequestListener } from 'node:http';
import { join } from 'node:path';
import { dataFolderOf, localSecrets } from './config/local-secrets.ts';
import { readSettings, type Settings } from './config/settings.ts';
import type { Say } from './config/start-error.ts';
import { openBucket, openDatabase, openMailServer } from './local-services.ts';
import { prepareDatabase } from './prepare-database.ts';
import { openRuntime } from './runtime.ts';
import { listen } from './web-server.ts';

export interface Started {
  origin: string;
  settings: Settings;
  /** Stops everything that this start began, the latest first, and nothing else. */
  stop: () => Promise<void>;
}

/** Starts the product whole, step by step; what was begun before a failing step is stopped again. */
export async function start(options: { dev: boolean; say: Say; signal: AbortSignal }): Promise<Started> {
  const { say, signal } = options;
  const stops: (() => Promise<void>)[] = [];
  const onStop = (stop: () => Promise<void>) => stops.push(stop);
  const stop = () => stopAll(stops, say);
  /** A step begins only while nobody asked to stop. */
  const step = <T>(name: string, work: () => Promise<T>): Promise<T> => {
    signal.throwIfAborted();
    say(name);
    return work();
  };

  try {
    const dataFolder = dataFolderOf(process.env);
    const secrets = localSecrets(dataFolder);
    const read = readSettings(process.env, secrets);
    const web = await step('port', () => listen(read.host, read.port));
    onStop(web.close);
    const settings =
      read.port === 0 && !process.env['PUBLIC_URL'] ? { ...read, publicUrl: web.origin } : read;

    const database = await step(
      settings.database ? 'database, as given' : 'database, our own PostgreSQL',
      () => openDatabase(settings, { dataFolder, secrets, say }, onStop),
    );
    const { ownerUrl } = database;
    if (ownerUrl) {
      const applied = await step('migrations', () => prepareDatabase(ownerUrl));
      if (applied.length > 0) say(`applied ${applied.length}`);
    }
    const objectStore = await step('object store', () => openBucket(settings, dataFolder, onStop));
    const smtpUrl = await step('mail', () => openMailServer(settings, dataFolder, onStop));
    const runtime = await step('application', () =>
      openRuntime(settings, { databaseUrl: database.url, objectStore, smtpUrl }),
    );
    onStop(runtime.close);
    await runtime.deps.objectStore.check().catch((error: unknown) => {
      const kind = error instanceof Error ? error.name : 'unknown';
      say(`the bucket does not answer (${kind}): files cannot be stored or read until it does`);
    });
    await step('worker', () => runtime.work());
    const api = runtime.application.express as RequestListener;
    web.serve(options.dev ? await step('client with reload', () => withReload(api, onStop)) : api);
    return { origin: settings.publicUrl, settings, stop };
  } catch (error) {
    await stop();
    throw error;
  }
}

/** In development Vite serves the client from its sources; the API stays ours. */
async function withReload(
  api: RequestListener,
  onStop: (stop: () => Promise<void>) => void,
): Promise<RequestListener> {
  const { createServer } = await import('vite');
  const vite = await createServer({
    configFile: join(import.meta.dirname, '../vite.config.ts'),
    server: { middlewareMode: true, hmr: { port: 0 } },
    appType: 'spa',
  });
  onStop(() => vite.close());
  return (request, response) => {
    if (request.url?.startsWith('/api/')) api(request, response);
    else vite.middlewares(request, response);
  };
}

async function stopAll(stops: (() => Promise<void>)[], say: Say): Promise<void> {
  for (const stop of stops.splice(0).reverse()) {
    await stop().catch((error: unknown) => say(error instanceof Error ? error.message : String(error)));
  }
}
