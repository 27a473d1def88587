import { canonicalHash } from './canonical.ts';

/** One changed address in an event: commitments only, never the value. */
export interface EventChange {
  /** `type/id` of the row the address lies in. */
  subject: string;
  address: string;
  old: string | null;
  new: string | null;
}

/** What an event's hash covers, member for member; a dump holds exactly this and the hash. */
export interface EventForm {
  study: string;
  sequence: number;
  /** UTC to the millisecond. */
  at: string;
  actor: string | null;
  membership: string | null;
  role: string;
  kind: string;
  subject: string;
  participant: string | null;
  site: string | null;
  changes: EventChange[];
  /** Commitment to the reason's text. */
  reason: string | null;
  /** Sequence of the event that set this one off. */
  cause: number | null;
  /** Release of the product that wrote it. */
  version: string;
  previous: string;
}

/** The hash before the first event. */
export const genesis = '0'.repeat(64);

/** SHA-256 of the event's RFC 8785 form, hex. */
export const eventHash = (event: EventForm): string => canonicalHash(event);
