/** What an address names: a field, one of its readings, or the rejection of that reading. */
export interface Address {
  /** The field, as `/field` or `/group/field`. */
  pointer: string;
  reading?: number;
  rejected?: true;
}

const pattern = /^((?:\/[a-z][A-Za-z0-9]*)+)(?:\/(0|[1-9]\d{0,2})(!rejected)?)?$/;

/** Reads an address; nothing when it is none. */
export function parseAddress(text: string): Address | undefined {
  const parts = pattern.exec(text);
  const pointer = parts?.[1];
  if (!parts || !pointer) return undefined;
  const reading = parts[2] === undefined ? {} : { reading: Number(parts[2]) };
  return { pointer, ...reading, ...(parts[3] ? { rejected: true } : {}) };
}

export function formatAddress({ pointer, reading, rejected }: Address): string {
  return pointer + (reading === undefined ? '' : `/${reading}`) + (rejected ? '!rejected' : '');
}
