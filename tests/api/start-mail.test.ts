import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { queueMail } from '#backend/jobs/mail/outbox.ts';
import { sendQueuedMail } from '#backend/jobs/mail/send-queued-mail.ts';
import { writeMail, type MailParams, type MailTemplate } from '#backend/jobs/mail/templates.ts';
import type { Job } from '#backend/jobs/queue.ts';
import { openMailer } from '#backend/services/mail.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer({ worker: true });
});
afterAll(() => server.stop());

const invitation = (to: string) => ({
  to,
  template: 'invitation' as const,
  params: { path: '/invitations/token-0123456789', validHours: 72 },
});
const inAct = <T>(work: Parameters<TestServer['orm']['em']['transactional']>[0]) =>
  server.orm.em.fork().transactional(work) as Promise<T>;
const outbox = (id: string) =>
  server.ownerSql<{ state: string; attempts: number; params: object; problem: string | null }>(
    'select state, attempts, params, problem from mail_outbox where id = $1',
    [id],
  );
const mailsTo = async (to: string) => (await server.mails()).filter((mail) => mail.to === to);

// proves EM-05
describe('the outbox', () => {
  it('sends after the commit, once, and forgets what the mail said', async () => {
    const id = await inAct<string>((tx) => queueMail(tx as never, invitation('ada@lab.example')));

    await vi.waitFor(
      async () => expect(await outbox(id)).toMatchObject([{ state: 'sent', attempts: 1 }]),
      5000,
    );

    const [mail, ...more] = await mailsTo('ada@lab.example');
    expect(more).toEqual([]);
    expect(mail?.subject).toBe('Your invitation to Vesselry');
    expect(mail?.text).toContain(`${server.url}/invitations/token-0123456789`);
    expect(mail?.messageId).toBe(`<${id}@127.0.0.1>`);
    expect(await outbox(id)).toMatchObject([{ params: {}, problem: null }]);
    expect(await server.ownerSql(`select data from job.job where name = 'mail.send'`)).toEqual([
      { data: { mailId: id } },
    ]);
  });

  it('sends nothing for an act that was rolled back', async () => {
    const act = inAct(async (tx) => {
      await queueMail(tx as never, invitation('never@lab.example'));
      throw new Error('refused');
    });
    await expect(act).rejects.toThrow('refused');
    const after = await inAct<string>((tx) => queueMail(tx as never, invitation('after@lab.example')));

    await vi.waitFor(async () => expect(await outbox(after)).toMatchObject([{ state: 'sent' }]), 5000);

    expect(await mailsTo('never@lab.example')).toEqual([]);
    expect(await server.ownerSql(`select from mail_outbox where recipient = 'never@lab.example'`)).toEqual(
      [],
    );
  });

  it('lets the act succeed while the mail server is away, keeps the row, and sends it once it is back', async () => {
    const away = openMailer({ smtpUrl: 'smtp://127.0.0.1:1', from: 'vesselry@localhost' });
    const back = openMailer({ smtpUrl: server.mailBox.smtpUrl, from: 'vesselry@localhost' });
    const deliver = (mailer: typeof away, mailId: string) =>
      sendQueuedMail({ fork: () => server.orm.em.fork(), sendMail: mailer.sendMail, publicUrl: server.url })({
        data: { mailId },
      } as Job<'mail.send'>);
    const id = await inAct<string>(async (tx) => {
      const mailId = await queueMail(tx as never, invitation('patient@lab.example'));
      // The worker of this server must not take it: this test delivers by hand.
      await tx.execute(
        `update job.job set start_after = now() + interval '1 hour' where data->>'mailId' = ?`,
        [mailId],
      );
      return mailId;
    });

    await expect(deliver(away, id)).rejects.toThrow();
    expect(await outbox(id)).toMatchObject([{ state: 'pending', attempts: 1, problem: 'ESOCKET' }]);

    await Promise.all([deliver(back, id), deliver(back, id)]);
    await deliver(back, id);

    expect(await outbox(id)).toMatchObject([{ state: 'sent', attempts: 2, problem: null }]);
    expect(await mailsTo('patient@lab.example')).toHaveLength(1);
  });

  it('is seen to have failed when its tries are used up', async () => {
    const id = await inAct<string>(async (tx) => {
      const mailId = await queueMail(tx as never, invitation('two@lab.example, three@lab.example'));
      await tx.execute(`update job.job set retry_limit = 0 where data->>'mailId' = ?`, [mailId]);
      return mailId;
    });

    await vi.waitFor(
      async () => expect(await outbox(id)).toMatchObject([{ state: 'failed', params: {} }]),
      5000,
    );
    expect((await server.mails()).some((mail) => mail.to.includes('three'))).toBe(false);
  });

  it('refuses a link that leads elsewhere while the act can still fail', async () => {
    const elsewhere = { ...invitation('x@lab.example'), params: { path: '//evil.example/x', validHours: 1 } };

    await expect(inAct((tx) => queueMail(tx as never, elsewhere))).rejects.toThrow('this installation only');
  });
});

const study = 'CANARY-STUDY\r\nBcc: evil@evil.example\u2028line';
const samples: { [T in MailTemplate]: MailParams[T] } = {
  invitation: { path: '/invitations/t', validHours: 72 },
  'password-reset': { path: '/reset/t', validMinutes: 30 },
  'account-changed': { change: 'second-factor' },
  'work-waiting': { waiting: 'query', study, path: '/queries' },
  'study-event': { event: 'allocation-opened', study, path: '/allocation' },
  'chain-heads': { study, heads: [{ sequence: 12, hash: 'ab'.repeat(32), at: '2026-12-01T03:17:00Z' }] },
};

describe.each(Object.keys(samples) as MailTemplate[])('the mail %s', (template) => {
  const mail = writeMail(template, samples[template], 'https://vesselry.example');

  // proves EM-02
  it('has a subject of our own words on one line, and links to the configured address only', () => {
    expect(mail.subject).toMatch(/^[\w ’'-]+$/);
    for (const [link] of mail.text.matchAll(/\w+:\/\/\S+/g))
      expect(new URL(link).origin).toBe('https://vesselry.example');
    expect(mail.text).not.toMatch(/^Bcc:/m);
  });

  it('says something of its own', () => {
    expect(mail.text.length).toBeGreaterThan(40);
    expect(mail.text).not.toContain('undefined');
  });
});
