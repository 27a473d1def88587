import type { EntityManager } from '@mikro-orm/postgresql';
import type { JobHandler } from './queue.ts';

/** What nobody can need any more; none of it is study data. Days are ours (common practice, no source). */
const leftovers = [
  'delete from session where expire < now()',
  'delete from rate_limit where expire < extract(epoch from now()) * 1000',
  `delete from job_beat where at < now() - interval '1 day'`,
  `delete from job_progress where state in ('done', 'failed', 'cancelled') and updated_at < now() - interval '90 days'`,
  `delete from mail_outbox where state <> 'pending' and created_at < now() - interval '1 year'`,
];

/** Clears ended sessions, run-out limits and old traces of jobs and mails, once a night. */
export function tidy(fork: () => EntityManager): JobHandler<'tidy'> {
  return async () => {
    const em = fork();
    for (const sql of leftovers) await em.execute(sql);
  };
}
