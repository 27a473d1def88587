import { join } from 'node:path';
import type { LocalSecrets } from './config/local-secrets.ts';
import type { Settings } from './config/settings.ts';
import { StartError, type Say } from './config/start-error.ts';
import { startLocalMailBox } from './services/local-mail-box.ts';
import { startLocalObjectStore } from './services/local-object-store.ts';
import { startLocalPostgres } from './services/postgres/local-postgres.ts';
import { withClient } from './services/postgres/roles.ts';

/** Remembers how to stop what was started; the latest is stopped first. */
export type OnStop = (stop: () => Promise<void>) => void;

/** The database as given, or one of our own in the data folder. */
export async function openDatabase(
  settings: Settings,
  place: { dataFolder: string; secrets: LocalSecrets; say: Say },
  onStop: OnStop,
): Promise<{ url: string; ownerUrl: string | undefined }> {
  if (settings.database) {
    await assertAnswers('DATABASE_URL', settings.database.url);
    if (settings.database.ownerUrl) await assertAnswers('DATABASE_OWNER_URL', settings.database.ownerUrl);
    return settings.database;
  }
  const postgres = await startLocalPostgres(place.dataFolder, place.secrets, place.say);
  onStop(postgres.stop);
  return postgres;
}

/** The bucket as given, or a store of our own. */
export async function openBucket(settings: Settings, dataFolder: string, onStop: OnStop) {
  if (settings.objectStore) return settings.objectStore;
  const store = await startLocalObjectStore(join(dataFolder, 'objects'));
  onStop(store.stop);
  return store.settings;
}

/** The mail server as given, or a mail box of our own. */
export async function openMailServer(
  settings: Settings,
  dataFolder: string,
  onStop: OnStop,
): Promise<string> {
  if (settings.mail.smtpUrl) return settings.mail.smtpUrl;
  const box = await startLocalMailBox(join(dataFolder, 'mail'));
  onStop(box.stop);
  return box.smtpUrl;
}

/** The driver's words could repeat the address with its password, so only its code is told. */
async function assertAnswers(setting: string, url: string): Promise<void> {
  try {
    await withClient(url, (client) => client.query('select 1'));
  } catch (error) {
    const { code = 'no reason given' } = error as { code?: string };
    throw new StartError(`${setting}: the database does not answer (${code}).`);
  }
}
