/** What each mail needs to be written: no participant's data can be named here (EM-01). `path` begins with a slash. */
export interface MailParams {
  invitation: { path: string; validHours: number };
  'password-reset': { path: string; validMinutes: number };
  'account-changed': { change: AccountChange };
  'work-waiting': { waiting: WaitingWork; study: string; path: string };
  'study-event': { event: StudyEvent; study: string; path: string };
  'chain-heads': { study: string; heads: { sequence: number; hash: string; at: string }[] };
}

export type MailTemplate = keyof MailParams;

/** Changes to a person's sign-in or rights, which nobody can choose not to hear of (EM-06). */
type AccountChange = keyof typeof accountChanges;
/** What a person is asked to come and do. */
type WaitingWork = keyof typeof waitingWork;

/** What others are told of: that it happened, never to whom, never what was seen. */
export type StudyEvent = keyof typeof studyEvents;

export interface MailText {
  subject: string;
  text: string;
}

type Link = (path: string) => string;

const accountChanges = {
  password: 'Your password was changed.',
  'second-factor': 'Your second factor was changed.',
  address: 'The e-mail address of your account was changed.',
  device: 'Your account was signed in from a device not seen before.',
  role: 'Your roles in a study were changed.',
};

const waitingWork = {
  query: 'A query needs you',
  signature: 'A signature is asked of you',
  review: 'A review is asked of you',
  unblinding: 'An unblinding needs your decision',
  export: 'An export that you asked for is ready',
  run: 'A run that you asked for has ended',
};

const studyEvents = {
  'identifiers-opened': 'Direct identifiers were opened urgently',
  'allocation-opened': 'An allocation was opened in an emergency',
  unblinded: 'The allocation was unblinded by two people',
};

const writers: { [T in MailTemplate]: (params: MailParams[T], link: Link) => MailText } = {
  invitation: ({ path, validHours }, link) => ({
    subject: 'Your invitation to Vesselry',
    text: `You have been invited to work in Vesselry.\n\nChoose your password here, within ${validHours} hours:\n${link(path)}\n\nThe link works once. If you expected no invitation, do nothing.`,
  }),
  'password-reset': ({ path, validMinutes }, link) => ({
    subject: 'A new password for Vesselry',
    text: `A new password was asked for with this address.\n\nChoose it here, within ${validMinutes} minutes:\n${link(path)}\n\nThe link works once. If you did not ask, do nothing: your password stays as it is.`,
  }),
  'account-changed': ({ change }, link) => ({
    subject: 'A change to your Vesselry account',
    text: `${accountChanges[change]}\n\nIf this was not you, tell your administrator at once and choose a new password:\n${link('/')}`,
  }),
  'work-waiting': ({ waiting, study, path }, link) => ({
    subject: `${waitingWork[waiting]} in Vesselry`,
    text: `${waitingWork[waiting]} in the study ${oneLine(study)}.\n\n${link(path)}`,
  }),
  'study-event': ({ event, study, path }, link) => ({
    subject: `${studyEvents[event]} in Vesselry`,
    text: `${studyEvents[event]} in the study ${oneLine(study)}.\n\nWho did it, when and why stands in the trail of the study. What was seen is not in this mail.\n\n${link(path)}`,
  }),
  'chain-heads': ({ study, heads }) => ({
    subject: 'Heads of the audit trail',
    text: `Keep this mail: it lets you prove later that the trail of ${oneLine(study)} was not rewritten.\n\n${heads
      .map(({ sequence, hash, at }) => `${at}  event ${sequence}  ${hash}`)
      .join('\n')}\n\nThe README tells how to check a dump against these heads.`,
  }),
};

/**
 * Writes a mail. Links start at the configured public address and never at the request's (EM-02).
 * @throws when a path would lead elsewhere
 */
export function writeMail<T extends MailTemplate>(
  template: T,
  params: MailParams[T],
  publicUrl: string,
): MailText {
  return writers[template](params, (path) => {
    const url = new URL(path, publicUrl);
    if (!path.startsWith('/') || url.origin !== new URL(publicUrl).origin) {
      throw new Error('A link in a mail leads to this installation only.');
    }
    return url.href;
  });
}

/** A title typed by people stays within its line. */
const oneLine = (text: string) =>
  text
    .replace(/[\p{Cc}\p{Zl}\p{Zp}]+/gu, ' ')
    .trim()
    .slice(0, 200);
