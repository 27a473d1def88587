import { createTransport } from 'nodemailer';

interface Mail {
  /** One plain address. */
  to: string;
  subject: string;
  text: string;
  /** Names the message, so that a second delivery of the same one can be told. */
  messageId?: string;
}

export interface Mailer {
  /** Resolves once the mail server has taken the message. */
  sendMail: (mail: Mail) => Promise<void>;
  close: () => void;
}

/** Sends through the mail server at `smtpUrl`; one connection a message, so an idle server holds none of ours. */
export function openMailer({ smtpUrl, from }: { smtpUrl: string; from: string }): Mailer {
  const transport = createTransport(
    {
      url: smtpUrl,
      connectionTimeout: 10_000,
      greetingTimeout: 10_000,
      socketTimeout: 30_000,
      disableFileAccess: true,
      disableUrlAccess: true,
    },
    { from },
  );
  return {
    sendMail: async ({ to, subject, text, messageId }) => {
      assertOneAddress(to);
      await transport.sendMail({ to, subject, text, ...(messageId ? { messageId } : {}) });
    },
    close: () => transport.close(),
  };
}

/** A comma, a line break or a name would add recipients or headers (EM-02). */
function assertOneAddress(to: string): void {
  if (!/^[^\s,;:<>()"\\@]+@[^\s,;:<>()"\\@]+$/.test(to)) throw new Error('A mail goes to one plain address.');
}
