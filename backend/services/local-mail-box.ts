import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises';
import type { AddressInfo } from 'node:net';
import { join } from 'node:path';
import { buffer } from 'node:stream/consumers';
import { SMTPServer } from 'smtp-server';
import { readMail, type ReceivedMail } from './read-mail.ts';

export interface LocalMailBox {
  smtpUrl: string;
  /** All mail received so far, oldest first. */
  mails: () => Promise<ReceivedMail[]>;
  stop: () => Promise<void>;
}

/** A mail server on the loopback for demo and tests: takes everything, delivers nothing, keeps `.eml` files. */
export async function startLocalMailBox(folder: string): Promise<LocalMailBox> {
  await mkdir(folder, { recursive: true, mode: 0o700 });
  let received = 0;
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    disableReverseLookup: true,
    onData: (stream, _session, done) => {
      received += 1;
      // The name sorts by time of arrival; nothing of the mail is in it.
      const name = `${new Date().toISOString().replaceAll(':', '')}-${String(received).padStart(6, '0')}.eml`;
      buffer(stream)
        .then((bytes) => keep(join(folder, name), bytes))
        .then(() => done(), done);
    },
  });
  server.on('error', () => undefined); // a client that hangs up is no reason to end the process
  await new Promise<void>((resolve, reject) => {
    server.server.once('error', reject);
    server.listen(0, '127.0.0.1', resolve);
  });
  const { port } = server.server.address() as AddressInfo;
  return {
    smtpUrl: `smtp://127.0.0.1:${port}`,
    mails: async () => {
      const names = (await readdir(folder)).filter((name) => name.endsWith('.eml')).sort();
      return Promise.all(names.map(async (name) => readMail(await readFile(join(folder, name)))));
    },
    stop: () => new Promise((resolve) => server.close(() => resolve())),
  };
}

async function keep(file: string, bytes: Buffer): Promise<void> {
  await writeFile(`${file}.part`, bytes, { mode: 0o600 });
  await rename(`${file}.part`, file);
}
