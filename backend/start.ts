import type { Step } from './assemble.ts';
import { dataFolderOf, localSecrets } from './config/local-secrets.ts';
import { readSettings, type Settings } from './config/settings.ts';
import type { Say } from './config/start-error.ts';
import { listen } from './web-server.ts';

export interface Started {
  settings: Settings;
  /** Stops everything that this start began, the latest first, and nothing else. */
  stop: () => Promise<void>;
}

/** Starts the product whole, step by step; what was begun before a failing step is stopped again. */
export async function start(options: { dev: boolean; say: Say; signal: AbortSignal }): Promise<Started> {
  const { dev, say, signal } = options;
  const stops: (() => Promise<void>)[] = [];
  const onStop = (stop: () => Promise<void>) => void stops.push(stop);
  const stop = () => stopAll(stops, say);
  const step: Step = (name, work) => {
    signal.throwIfAborted(); // a step begins only while nobody asked to stop
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
    // Most of the code is loaded here, so that a wrong setting or a taken port is told at once.
    const { assemble } = await import('./assemble.ts');
    web.serve(await assemble(settings, { dataFolder, secrets, web, dev, say, step, onStop }));
    return { settings, stop };
  } catch (error) {
    await stop();
    throw error;
  }
}

async function stopAll(stops: (() => Promise<void>)[], say: Say): Promise<void> {
  for (const stop of stops.splice(0).reverse()) {
    await stop().catch((error: unknown) => say(error instanceof Error ? error.message : String(error)));
  }
}
