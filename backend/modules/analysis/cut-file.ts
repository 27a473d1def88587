import type { EntryValue } from '#schemas/instruments/entry-values.ts';
import type { Design } from '#schemas/protocol/protocol.ts';
import type { Level } from '#schemas/vocabulary/states.ts';

/** First line of a cut: what it is of, and the event up to which it holds. */
export interface CutHead {
  line: 'study';
  study: string;
  kind: 'rehearsal' | 'final';
  /** Newest event that changed data: a cut made twice from one state is the same to the byte. */
  asOf: { sequence: number; hash: string; at: string };
  design: Design;
  conditions: { key: string; label: string }[];
  protocols: { version: number; hash: string }[];
  instruments: { key: string; version: number; hash: string }[];
  enrolled: number;
}

export interface CutParticipant {
  line: 'participant';
  participant: string;
  site: string;
  state: string;
  /** Null before allocation. */
  sequence: string | null;
  firstDay: string | null;
}

export interface CutVisit {
  line: 'visit';
  participant: string;
  visitType: string;
  label: string;
  period: number | null;
  condition: string | null;
  state: string;
  missedReason: string | null;
  startedAt: string | null;
  endedAt: string | null;
}

export interface CutValue {
  value?: EntryValue;
  written?: string;
  level?: Level;
  rule?: string;
}

export interface CutEntry {
  line: 'entry';
  participant: string;
  visitType: string | null;
  step: string | null;
  instrument: string;
  version: number;
  state: string;
  revision: number;
  contentHash: string;
  values: Record<string, CutValue>;
}

export interface CutMeasure {
  line: 'measure';
  participant: string;
  visitType: string;
  period: number | null;
  condition: string | null;
  timePoint: string;
  quantity: string;
  unit: string;
  value: number | null;
  reason: string | null;
}

export interface CutDeviation {
  line: 'deviation';
  participant: string;
  visitType: string | null;
  step: string | null;
  origin: string;
}

/** A cut is these lines, one JSON object each, in the order of participants' codes. */
export type CutLine = CutHead | CutParticipant | CutVisit | CutEntry | CutMeasure | CutDeviation;

/** Reads the lines of a cut from its bytes. */
export async function* readCut(bytes: AsyncIterable<Uint8Array>): AsyncGenerator<CutLine> {
  const decoder = new TextDecoder();
  let rest = '';
  for await (const chunk of bytes) {
    const lines = (rest + decoder.decode(chunk, { stream: true })).split('\n');
    rest = lines.pop() ?? '';
    for (const line of lines) if (line !== '') yield JSON.parse(line) as CutLine;
  }
  if (rest !== '') yield JSON.parse(rest) as CutLine;
}
