import type { EntityManager } from '@mikro-orm/postgresql';
import { randomUUID } from 'node:crypto';
import { sendJob } from '../send.ts';
import { writeMail, type MailParams, type MailTemplate } from './templates.ts';

export interface MailRequest<T extends MailTemplate> {
  /** Address of a person of the study team. */
  to: string;
  template: T;
  params: MailParams[T];
}

/** Puts a mail into the outbox inside the act's transaction; it leaves after the commit, or never (EM-05). */
export async function queueMail<T extends MailTemplate>(
  tx: EntityManager,
  { to, template, params }: MailRequest<T>,
): Promise<string> {
  // What cannot be written is refused now, while the act that asks for it can still fail.
  writeMail(template, params, 'https://vesselry.invalid');
  const mailId = randomUUID();
  await tx.execute('insert into mail_outbox (id, recipient, template, params) values (?, ?, ?, ?::jsonb)', [
    mailId,
    to,
    template,
    JSON.stringify(params),
  ]);
  await sendJob(tx, 'mail.send', { mailId });
  return mailId;
}

/** Gives a mail up whose tries are used up. What it said (a token, perhaps) is of no more use. */
export async function failMail(em: EntityManager, mailId: string): Promise<void> {
  await em.execute(
    `update mail_outbox set state = 'failed', params = '{}', settled_at = clock_timestamp()
     where id = ? and state = 'pending'`,
    [mailId],
  );
}
