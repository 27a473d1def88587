import { compareJson, type JsonChange } from '../json/compare-json.ts';
import type { Protocol } from './protocol.ts';

/** One thing that an amendment changes, with the sentence that a person reads. */
export interface ProtocolDifference {
  /** Names of the parts from the outside in, keys for visits, steps and measures. */
  path: string[];
  kind: JsonChange['kind'];
  before?: unknown;
  after?: unknown;
  /** The visit type it touches: open visits of this type are the ones to look at. */
  visitType?: string;
  sentence: string;
}

/** What one version of a protocol changes about another: computed from the two contents, never stored. */
export function protocolDifference(before: Protocol, after: Protocol): ProtocolDifference[] {
  return compareJson(before, after).map((change) => {
    const [first, second] = change.path;
    const visitType = first === 'visitTypes' && second !== undefined ? { visitType: second } : {};
    return { ...change, ...visitType, sentence: sentenceOf(change, before, after) };
  });
}

function sentenceOf(change: JsonChange, before: Protocol, after: Protocol): string {
  const { names, rest } = subjectOf(change.path, change.kind === 'removed' ? before : after);
  const words = rest.map((part) => partWords[part] ?? part).join(', ');
  if (rest.length === 0) return `${names.join(', ')}: ${kindWords[change.kind]}`;
  const subject = names.length === 0 ? capital(words) : `${names.join(', ')}: ${words}`;
  switch (change.kind) {
    case 'added':
      return `${subject} added: ${shown(change.after)}`;
    case 'removed':
      return `${subject} removed, was ${shown(change.before)}`;
    case 'changed':
      return `${subject} changed from ${shown(change.before)} to ${shown(change.after)}`;
    case 'reordered':
      return `${subject} put in another order: ${shown(change.after)}`;
  }
}

/** Walks a path as far as it names things with labels; what is left are words of the protocol. */
function subjectOf(path: string[], protocol: Protocol): { names: string[]; rest: string[] } {
  const names: string[] = [];
  let here: unknown = protocol;
  let at = 0;
  for (const [index, part] of path.entries()) {
    if (!Array.isArray(here)) {
      here = typeof here === 'object' && here !== null ? (here as Record<string, unknown>)[part] : undefined;
      continue;
    }
    const item: unknown = here.find((one: unknown) => (one as { key?: unknown }).key === part);
    names.push((item as { label?: string } | undefined)?.label ?? part);
    at = index + 1;
    here = item;
  }
  return { names, rest: path.slice(at) };
}

const kindWords: Record<JsonChange['kind'], string> = {
  added: 'added',
  removed: 'removed',
  changed: 'changed',
  reordered: 'put in another order',
};

const partWords: Record<string, string> = {
  allocation: 'allocation',
  anchor: 'anchor',
  blockSizes: 'block sizes',
  durationMinutes: 'duration in minutes',
  from: 'fields it comes from',
  holdPoint: 'hold point',
  liveQuantities: 'live quantities',
  maximumMinutes: 'longest time in minutes',
  missedVisitReasons: 'reasons for a missed visit',
  participantLogs: 'participant logs',
  performedBy: 'performed by',
  plannedMinute: 'planned minute',
  plannedParticipants: 'planned participants',
  runSheet: 'run sheet',
  safetyLimits: 'safety limits',
  stratifyBySite: 'stratified by site',
  targetDay: 'target day',
  timePoint: 'time point',
  unblinding: 'hidden until unblinding',
  visitTypes: 'visits',
  washoutDays: 'washout in days',
  windowAfter: 'days it may be late',
  windowBefore: 'days it may be early',
};

/** A value as a person reads it: things by their labels, lists by their items, the rest as JSON. */
function shown(value: unknown): string {
  if (typeof value === 'string') return `"${value}"`;
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (Array.isArray(value)) return value.length === 0 ? 'none' : value.map(shown).join(', ');
  const label = typeof value === 'object' && value !== null && 'label' in value ? value.label : undefined;
  return typeof label === 'string' ? `"${label}"` : JSON.stringify(value);
}

function capital(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}
