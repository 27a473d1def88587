import type { EntityManager } from '@mikro-orm/postgresql';
import type { JobHandler } from '../queue.ts';
import { writeMail, type MailParams, type MailTemplate } from './templates.ts';

interface OutboxRow {
  recipient: string;
  template: MailTemplate;
  params: MailParams[MailTemplate];
}

type SendMail = (mail: { to: string; subject: string; text: string; messageId: string }) => Promise<void>;

/**
 * Sends one mail of the outbox, once: the row is locked while the mail server takes it. Should the process die between
 * the server's yes and our commit, the second delivery carries the same Message-ID, by which it can be told.
 */
export function sendQueuedMail(deps: {
  fork: () => EntityManager;
  sendMail: SendMail;
  publicUrl: string;
}): JobHandler<'mail.send'> {
  const { fork, sendMail, publicUrl } = deps;
  return async ({ data: { mailId } }) => {
    try {
      await fork().transactional(async (tx) => {
        const [row] = await tx.execute<OutboxRow[]>(
          `select recipient, template, params from mail_outbox where id = ? and state = 'pending' for update skip locked`,
          [mailId],
        );
        if (!row) return; // sent already, given up, or being sent by another try
        const messageId = `<${mailId}@${new URL(publicUrl).hostname}>`;
        await sendMail({ to: row.recipient, ...writeMail(row.template, row.params, publicUrl), messageId });
        await tx.execute(
          `update mail_outbox set state = 'sent', params = '{}', problem = null, attempts = attempts + 1,
             settled_at = clock_timestamp() where id = ?`,
          [mailId],
        );
      });
    } catch (error) {
      await fork().execute(`update mail_outbox set attempts = attempts + 1, problem = ? where id = ?`, [
        problemCode(error),
        mailId,
      ]);
      throw error;
    }
  };
}

/** The mail server's words may repeat the address, its code does not. */
function problemCode(error: unknown): string {
  const { code, responseCode } = error as { code?: string; responseCode?: number };
  return [responseCode, code].filter(Boolean).join(' ') || 'unknown';
}
