import { localSecrets } from '#backend/config/local-secrets.ts';
import { startLocalPostgres } from '#backend/services/postgres/local-postgres.ts';

/** A process of its own that starts the database of a data folder and dies before it can stop it. */
const [dataFolder = ''] = process.argv.slice(2);
await startLocalPostgres(dataFolder, localSecrets(dataFolder), () => undefined);
process.kill(process.pid, 'SIGKILL');
