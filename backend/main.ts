import { StartError } from './config/start-error.ts';
import { logger, stackOf } from './http/logger.ts';
import { start, type Started } from './start.ts';

const say = (text: string) => process.stdout.write(`  ${text}\n`);
const stopping = new AbortController();
const asked = new Promise<void>((resolve) => {
  stopping.signal.addEventListener('abort', () => resolve());
});
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
  process.on(signal, () => stopping.abort());
}
// One broken promise in a job or a library must not take everybody's requests down with it.
process.on('unhandledRejection', (error) =>
  logger.error({ error: stackOf(error) }, 'a promise was rejected unheard'),
);

process.stdout.write('Vesselry is starting\n');
try {
  const started = await start({ dev: process.argv.includes('--dev'), say, signal: stopping.signal });
  await greet(started);
  await asked;
  process.stdout.write('\nstopping\n');
  await started.stop();
  process.exit(0);
} catch (error) {
  if (stopping.signal.aborted) process.exit(130);
  const known = error instanceof StartError;
  process.stderr.write(`\n${known ? error.message : 'Vesselry could not start:'}\n`);
  if (!known) console.error(error);
  process.exit(1);
}

async function greet({ settings }: Started): Promise<void> {
  process.stdout.write(`\nVesselry is running at ${settings.publicUrl}\n`);
  if (settings.demo) {
    const { demoAccounts } = await import('./modules/accounts/index.ts');
    process.stdout.write('\nDemo accounts (invented people; never in production):\n');
    for (const { email, password, roles } of demoAccounts) say(`${email}  ${password}  ${roles}`);
  }
  process.stdout.write('\nFor research only. Stop with Ctrl-C.\n');
}
