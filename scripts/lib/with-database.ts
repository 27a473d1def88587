import { dataFolderOf, localSecrets } from '#backend/config/local-secrets.ts';
import { readSettings, type Settings } from '#backend/config/settings.ts';
import { StartError } from '#backend/config/start-error.ts';
import { openDatabase } from '#backend/local-services.ts';

const say = (text: string) => process.stderr.write(`${text}\n`);

/** Runs a command on the installation's own database, starting it where it does not run. */
export async function withDatabase(
  work: (database: { url: string; ownerUrl: string; settings: Settings }) => Promise<void>,
): Promise<void> {
  await command(async () => {
    const dataFolder = dataFolderOf(process.env);
    const secrets = localSecrets(dataFolder);
    const settings = readSettings(process.env, secrets);
    const stops: (() => Promise<void>)[] = [];
    const { url, ownerUrl } = await openDatabase(settings, { dataFolder, secrets, say }, (stop) =>
      stops.push(stop),
    );
    try {
      if (!ownerUrl) throw new StartError('DATABASE_OWNER_URL is missing: this command works as the owner.');
      await work({ url, ownerUrl, settings });
    } finally {
      for (const stop of stops) await stop();
    }
  });
}

/** Runs a command; what the person can mend is told without a stack. */
export async function command(work: () => Promise<void>): Promise<void> {
  try {
    await work();
  } catch (error) {
    if (error instanceof StartError) say(error.message);
    else console.error(error);
    process.exitCode = 1;
  }
}
