import type { RequestListener, Server } from 'node:http';
import { join } from 'node:path';
import type { LocalSecrets } from './config/local-secrets.ts';
import type { Settings } from './config/settings.ts';
import type { Say } from './config/start-error.ts';
import { openBucket, openDatabase, openMailServer, type OnStop } from './local-services.ts';
import { seedDemo } from './modules/demo/index.ts';
import { prepareDatabase } from './prepare-database.ts';
import { openRuntime } from './runtime.ts';
import type { WebServer } from './web-server.ts';

/** Runs one step of the start, its name shown. */
export type Step = <T>(name: string, work: () => Promise<T>) => Promise<T>;

interface Place {
  dataFolder: string;
  secrets: LocalSecrets;
  web: WebServer;
  dev: boolean;
  say: Say;
  step: Step;
  onStop: OnStop;
}

/** Brings up what the product stands on, then the product; answers what serves its requests. */
export async function assemble(settings: Settings, place: Place): Promise<RequestListener> {
  const { dataFolder, web, say, step, onStop } = place;
  const database = await step(settings.database ? 'database, as given' : 'database, our own PostgreSQL', () =>
    openDatabase(settings, place, onStop),
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
  if (settings.demo) await step('demo data, on the first start only', () => seedDemo(runtime.deps, say));
  const api = runtime.application.express as RequestListener;
  return place.dev ? step('client with reload', () => withReload(api, web.server, onStop)) : api;
}

/** In development Vite serves the client from its sources; the API stays ours. */
async function withReload(api: RequestListener, server: Server, onStop: OnStop): Promise<RequestListener> {
  const { createServer } = await import('vite');
  const vite = await createServer({
    configFile: join(import.meta.dirname, '../vite.config.ts'),
    server: { middlewareMode: true, hmr: { server } },
    appType: 'spa',
  });
  onStop(() => vite.close());
  return (request, response) => {
    if (request.url?.startsWith('/api/')) api(request, response);
    else vite.middlewares(request, response);
  };
}
