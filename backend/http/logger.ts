import { AsyncLocalStorage } from 'node:async_hooks';
import { pino } from 'pino';

const requestIds = new AsyncLocalStorage<string>();

/** Runs a request with its id in every line that is logged on its behalf. */
export const withRequestId = <T>(requestId: string, work: () => T): T => requestIds.run(requestId, work);

/** Who, what, when in UTC; never bodies, queries, cookies or values of participants. */
export const logger = pino({
  base: undefined,
  level: 'warn', // until the settings are read
  timestamp: pino.stdTimeFunctions.isoTime,
  redact: [
    'password',
    '*.password',
    'token',
    '*.token',
    'cookie',
    '*.cookie',
    'authorization',
    '*.authorization',
  ],
  mixin: () => ({ requestId: requestIds.getStore() }),
});

/** An error as the log keeps it: its other fields (a database's `detail`, say) may hold values of participants. */
export const stackOf = (error: unknown): string =>
  error instanceof Error ? (error.stack ?? error.name) : String(error);
