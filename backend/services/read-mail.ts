export interface ReceivedMail {
  from: string;
  to: string;
  subject: string;
  messageId: string;
  text: string;
  /** The message as received, headers and all. */
  source: string;
}

/** Reads a plain-text message (RFC 5322, encoded words of RFC 2047, transfer encodings of RFC 2045). */
export function readMail(bytes: Buffer): ReceivedMail {
  const source = bytes.toString('latin1');
  const [head = '', ...rest] = source.split('\r\n\r\n');
  const lines = head.replace(/\r\n[ \t]+/g, ' ').split('\r\n');
  const header = (name: string) => {
    const line = lines.find((candidate) => candidate.toLowerCase().startsWith(`${name}:`)) ?? '';
    return decodeWords(line.slice(name.length + 1).trim());
  };
  const text = decodeBody(rest.join('\r\n\r\n'), header('content-transfer-encoding').toLowerCase());
  return {
    from: header('from'),
    to: header('to'),
    subject: header('subject'),
    messageId: header('message-id'),
    text: text.replaceAll('\r\n', '\n').trimEnd(),
    source: bytes.toString('utf8'),
  };
}

function decodeBody(body: string, encoding: string): string {
  if (encoding === 'base64') return Buffer.from(body, 'base64').toString('utf8');
  if (encoding === 'quoted-printable') return decodeQuoted(body.replace(/=[ \t]*\r\n/g, ''));
  return Buffer.from(body, 'latin1').toString('utf8');
}

function decodeWords(value: string): string {
  // The space between two encoded words belongs to neither.
  const joined = value.replace(/(\?=)\s+(=\?)/g, '$1$2');
  return joined.replace(/=\?utf-8\?([bq])\?([^?]*)\?=/gi, (_word, kind: string, content: string) =>
    kind.toLowerCase() === 'b'
      ? Buffer.from(content, 'base64').toString('utf8')
      : decodeQuoted(content.replaceAll('_', ' ')),
  );
}

function decodeQuoted(value: string): string {
  const bytes = value.replace(/=([0-9A-F]{2})/gi, (_code, hex: string) =>
    String.fromCharCode(parseInt(hex, 16)),
  );
  return Buffer.from(bytes, 'latin1').toString('utf8');
}
