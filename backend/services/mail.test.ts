import { mkdtemp, readdir, rm, stat } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { startLocalMailBox, type LocalMailBox } from './local-mail-box.ts';
import { openMailer, type Mailer } from './mail.ts';

let folder: string;
let box: LocalMailBox;
let mailer: Mailer;

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'vesselry-mail-'));
  box = await startLocalMailBox(folder);
  mailer = openMailer({ smtpUrl: box.smtpUrl, from: 'Vesselry <vesselry@localhost>' });
});

afterEach(async () => {
  mailer.close();
  await box.stop();
  await rm(folder, { recursive: true });
});

describe('mail', () => {
  it('arrives in the local mail box as it was written', async () => {
    const subject =
      'Änderung an Ihrer Anmeldung – zweiter Faktor, und der Betreff ist länger als eine Zeile sein darf';
    const text = `Grüße, ${'a long line '.repeat(20)}\n\n.\nA line = with signs ?= and 37 °C\n\nhttps://vesselry.example/x`;

    await mailer.sendMail({ to: 'rowan@lab.example', subject, text, messageId: '<one@vesselry>' });

    const [mail, ...more] = await box.mails();
    expect(more).toEqual([]);
    expect(mail).toMatchObject({
      from: 'Vesselry <vesselry@localhost>',
      to: 'rowan@lab.example',
      subject,
      text,
    });
    expect(mail?.messageId).toBe('<one@vesselry>');
  });

  it('keeps the order of arrival, in files that only their owner may read', async () => {
    for (const subject of ['first', 'second', 'third']) {
      await mailer.sendMail({ to: 'rowan@lab.example', subject, text: subject });
    }

    expect((await box.mails()).map((mail) => mail.subject)).toEqual(['first', 'second', 'third']);
    const [file = ''] = await readdir(folder);
    expect((await stat(join(folder, file))).mode & 0o077).toBe(0);
    expect(file).not.toContain('rowan');
  });

  // proves EM-02
  it.each([
    'a@lab.example, b@lab.example',
    'a@lab.example\r\nBcc: b@lab.example',
    'Rowan <a@lab.example>',
    'nobody',
    '',
  ])('refuses %j as a recipient', async (to) => {
    await expect(mailer.sendMail({ to, subject: 's', text: 't' })).rejects.toThrow('one plain address');
    expect(await box.mails()).toEqual([]);
  });

  // proves EM-02
  it('lets no line break in a subject become a header', async () => {
    await mailer.sendMail({
      to: 'a@lab.example',
      subject: 'Waiting\r\nBcc: b@lab.example\r\n\r\nbody',
      text: 'text',
    });

    const [mail] = await box.mails();
    expect(mail?.source).not.toMatch(/^Bcc:/im);
    expect(mail?.text).toBe('text');
  });

  it('tells when the mail server is away', async () => {
    const { smtpUrl } = box;
    await box.stop();
    const lonely = openMailer({ smtpUrl, from: 'vesselry@localhost' });

    await expect(lonely.sendMail({ to: 'a@lab.example', subject: 's', text: 't' })).rejects.toThrow(
      'ECONNREFUSED',
    );
    lonely.close();
  });
});
