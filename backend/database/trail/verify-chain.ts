import { canonicalHash } from './canonical.ts';
import { commitmentOf } from './commitment.ts';
import { eventHash, genesis, type EventForm } from './event-form.ts';

/** An event as a dump holds it. */
export interface DumpedEvent extends EventForm {
  hash: string;
}

/** A value as the values' file holds it; emptied when it was redacted. */
export interface DumpedValue {
  study: string;
  id: string;
  subject: string;
  address: string;
  sequence: number;
  salt: string | null;
  value: unknown;
  written: string | null;
  commitment: string;
  redactedAt: string | null;
}

/** A revision of an entry as a dump holds it: commitments only. */
export interface DumpedRevision {
  study: string;
  entry: string;
  revision: number;
  sequence: number;
  contentHash: string;
  changes: Record<string, string | null>;
}

/** The newest event of a chain, as it was printed somewhere outside: on a receipt, in a manifest, in a mail. */
export interface Head {
  study: string;
  sequence: number;
  hash: string;
}

export interface Finding {
  study: string;
  sequence: number | null;
  message: string;
}

/** Follows the chains event by event; what was changed, removed, inserted or cut off is found. */
export class ChainVerifier {
  readonly findings: Finding[] = [];
  readonly heads = new Map<string, Head>();
  readonly redactions: DumpedValue[] = [];
  events = 0;
  values = 0;

  readonly #commitments = new Map<string, Set<string>>();
  readonly #wanted = new Map<string, Head[]>();
  readonly #contents = new Map<string, { revision: number; content: Map<string, string> }>();

  /** `heads` were printed earlier; each must lie in the dump, unchanged. */
  constructor(heads: readonly Head[]) {
    for (const head of heads) this.#wanted.set(head.study, [...(this.#wanted.get(head.study) ?? []), head]);
  }

  /** Takes the next event of its chain, in the order of their sequence. */
  event({ hash, ...form }: DumpedEvent): void {
    this.events += 1;
    const { study, sequence } = form;
    const last = this.heads.get(study) ?? { study, sequence: 0, hash: genesis };
    if (sequence !== last.sequence + 1) {
      this.#find(study, sequence, `follows ${last.sequence}: an event was removed or inserted`);
    }
    if (form.previous !== last.hash) this.#find(study, sequence, 'does not name the event before it');
    if (eventHash(form) !== hash) this.#find(study, sequence, 'was changed: its hash does not fit');
    for (const wanted of this.#wanted.get(study) ?? []) {
      if (wanted.sequence === sequence && wanted.hash !== hash) {
        this.#find(study, sequence, 'is not the event whose hash was printed: the chain was made anew');
      }
    }
    this.heads.set(study, { study, sequence, hash });
    const commitments = form.changes.flatMap((change) => (change.new === null ? [] : [change.new]));
    this.#commitments.set(
      `${study}/${sequence}`,
      new Set([...commitments, ...(form.reason ? [form.reason] : [])]),
    );
  }

  /** Takes a value of the values' file: it must be what its event committed to. */
  value(value: DumpedValue): void {
    this.values += 1;
    const { study, sequence } = value;
    if (!this.#commitments.get(`${study}/${sequence}`)?.delete(value.commitment)) {
      this.#find(study, sequence, `does not know the value at ${value.subject}${value.address}`);
    }
    if (value.redactedAt !== null || value.salt === null) {
      this.redactions.push(value);
      return;
    }
    const salt = Buffer.from(value.salt, 'hex');
    if (commitmentOf(salt, value.value, value.written) !== value.commitment) {
      this.#find(
        study,
        sequence,
        `has another value at ${value.subject}${value.address} than was committed to`,
      );
    }
  }

  /** Takes an entry's next revision: the hash of its content must come out of the commitments. */
  revision({ study, entry, revision, sequence, contentHash, changes }: DumpedRevision): void {
    const key = `${study}/${entry}`;
    const known = this.#contents.get(key) ?? { revision: 0, content: new Map<string, string>() };
    if (revision <= known.revision)
      this.#find(study, sequence, `entry ${entry}: revision ${revision} comes twice`);
    for (const [address, commitment] of Object.entries(changes)) {
      if (commitment === null) known.content.delete(address);
      else known.content.set(address, commitment);
    }
    if (canonicalHash(Object.fromEntries(known.content)) !== contentHash) {
      this.#find(
        study,
        sequence,
        `entry ${entry}: the content of revision ${revision} does not fit its hash`,
      );
    }
    this.#contents.set(key, { revision, content: known.content });
  }

  /** After the last line: every printed head must have been met, every committed value been there. */
  finish(): Finding[] {
    if (this.values > 0) this.#findMissingValues();
    for (const [study, heads] of this.#wanted) {
      const last = this.heads.get(study);
      for (const head of heads) {
        if (last === undefined || last.sequence < head.sequence) {
          this.#find(study, head.sequence, 'was printed, but the dump ends before it: events were cut off');
        }
      }
    }
    return this.findings;
  }

  #findMissingValues(): void {
    for (const [key, left] of this.#commitments) {
      if (left.size === 0) continue;
      const [study = '', sequence] = key.split('/');
      this.#find(
        study,
        Number(sequence),
        `committed to ${left.size} values that are not in the values’ file`,
      );
    }
  }

  #find(study: string, sequence: number | null, message: string): void {
    this.findings.push({ study, sequence, message });
  }
}
