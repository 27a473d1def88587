import { fileTypeFromBuffer } from 'file-type';
import { sourceTypes, type SourceType } from '#schemas/vocabulary/source-kinds.ts';
import { Problem } from '#backend/http/problem.ts';

const refuse = (detail: string): Problem => new Problem(422, 'file-not-accepted', detail);

/** What the first bytes say the file is; a type that is not listed is refused whatever its name or header says. */
async function typeOf(first: Uint8Array): Promise<SourceType> {
  const found = await fileTypeFromBuffer(first);
  if (found === undefined) {
    if (first.includes(0)) throw refuse('This file is of no type that is accepted: PDF, PNG, JPEG or CSV.');
    return 'text/csv';
  }
  const type = sourceTypes.find((one) => one === found.mime);
  if (type === undefined)
    throw refuse(`A file of type ${found.mime} is not accepted: send PDF, PNG, JPEG or CSV.`);
  return type;
}

/** A file on its way in: its type is known once the first bytes are there, its soundness at its end. */
export interface IncomingFile {
  body: AsyncGenerator<Uint8Array>;
  type: () => SourceType;
}

/**
 * Looks at a file while it passes. An empty one, a PDF without an end, a table that is not UTF-8 text
 * are refused when the last byte has gone by, before anything is on record.
 */
export function acceptFile(source: AsyncIterable<Uint8Array>): IncomingFile {
  let type: SourceType | undefined;
  async function* body(): AsyncGenerator<Uint8Array> {
    const text = new TextDecoder('utf-8', { fatal: true });
    let head: Buffer = Buffer.alloc(0);
    let tail: Buffer = Buffer.alloc(0);
    for await (const chunk of source) {
      if (type === undefined) {
        head = Buffer.concat([head, chunk]);
        if (head.length < 4100) continue;
        type = await typeOf(head);
        decode(text, type, head);
        tail = lastOf(head);
        yield head;
        continue;
      }
      decode(text, type, chunk);
      tail = lastOf(Buffer.concat([tail, chunk]));
      yield chunk;
    }
    if (type === undefined) {
      if (head.length === 0) throw refuse('The file is empty.');
      type = await typeOf(head);
      decode(text, type, head);
      tail = lastOf(head);
      yield head;
    }
    if (type === 'application/pdf' && !tail.includes('%%EOF'))
      throw refuse('The PDF is cut off: its end is missing.');
  }
  return {
    body: body(),
    type: () => {
      if (type === undefined) throw refuse('The file is empty.');
      return type;
    },
  };
}

const lastOf = (bytes: Buffer): Buffer => bytes.subarray(-2048);

function decode(decoder: TextDecoder, type: SourceType, chunk: Uint8Array): void {
  if (type !== 'text/csv') return;
  try {
    if (decoder.decode(chunk, { stream: true }).includes('\u0000')) throw new TypeError('a zero byte');
  } catch {
    throw refuse('The table is not UTF-8 text; save it as CSV in UTF-8.');
  }
}
