import type { EntityManager, Knex } from '@mikro-orm/postgresql';
import PgBoss from 'pg-boss';
import { queueSchema, type JobData, type QueueName } from './queues.ts';

/** Writes the job's row and nothing else: every statement goes through the caller's transaction. */
const writer = new PgBoss({
  schema: queueSchema,
  db: { executeSql: () => Promise.reject(new Error('Jobs are sent inside a transaction.')) },
});

/**
 * Queues a job inside the act's own transaction: committed with it, rolled back with it.
 * @throws when the queue is not installed, for pg-boss would lose the job without a word
 */
export async function sendJob<N extends QueueName>(
  tx: EntityManager,
  name: N,
  data: JobData[N],
): Promise<string> {
  const id = await writer.send(name, data, { db: { executeSql: transactionSql(tx) } });
  if (id === null) throw new Error(`The queue ${name} is not installed: migrations are behind.`);
  return id;
}

/** The part of a transaction's client that is used here; inside a transaction it gives that one's connection. */
interface TransactionClient {
  acquireConnection: () => Promise<{
    query: (text: string, values: unknown[]) => Promise<{ rows: unknown[] }>;
  }>;
}

function transactionSql(tx: EntityManager): PgBoss.Db['executeSql'] {
  const context = tx.getTransactionContext<Knex.Transaction>();
  if (!context) throw new Error('A job is sent only inside a transaction, so that both commit or neither.');
  const client = context.client as TransactionClient;
  return async (text, values) => (await client.acquireConnection()).query(text, values);
}
