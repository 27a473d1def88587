import type { EntityManager } from '@mikro-orm/postgresql';
import type { CompiledField, CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import { isMissing } from '#schemas/instruments/entry-values.ts';
import { daysBetween } from '#schemas/protocol/visit-window.ts';
import { instrumentLibrary } from '../../instruments/index.ts';
import { InstrumentVersionSchema } from '../../instruments/instrument.entity.ts';
import type { CutEntry, CutHead, CutLine, CutVisit } from '../../analysis/index.ts';
import type { Cell } from './csv.ts';
import { treatmentOf, treatmentWords, type Treatment } from './treatment.ts';

/** One column of an instrument's table. */
export interface Column {
  name: string;
  address: string;
  field: CompiledField;
  treatment: Exclude<Treatment, { kind: 'leave-out' }>;
}

export interface InstrumentTable {
  key: string;
  version: number;
  hash: string;
  compiled: CompiledInstrument;
  columns: Column[];
  /** In the cut's order, with the cut's codes: re-keyed and reordered when the bundle is written. */
  rows: {
    participant: string;
    visitType: string;
    step: string;
    period: string;
    studyDay: Cell;
    cells: Cell[];
  }[];
}

export interface Collected {
  head: CutHead;
  participants: { participant: string; site: string }[];
  tables: InstrumentTable[];
  leftOut: { field: string; why: string }[];
  quasiIdentifiers: { field: string; treatment: string }[];
  /** Participant → what leaves of the quasi-identifiers, for counting groups. */
  quasiValues: Map<string, Map<string, string>>;
  agesPooled: number;
}

/** Reads a cut once into what may leave of it: the same for the disclosure report and for the bundle. */
export async function collect(
  em: EntityManager,
  studyId: string,
  lines: AsyncIterable<CutLine>,
): Promise<Collected> {
  let head: CutHead | undefined;
  const participants: Collected['participants'] = [];
  const firstDays = new Map<string, string>();
  const visits = new Map<string, CutVisit>();
  const entries: CutEntry[] = [];
  for await (const line of lines) {
    if (line.line === 'study') head = line;
    else if (line.line === 'participant') {
      participants.push({ participant: line.participant, site: line.site });
      if (line.firstDay !== null) firstDays.set(line.participant, line.firstDay);
    } else if (line.line === 'visit') visits.set(`${line.participant} ${line.visitType}`, line);
    else if (line.line === 'entry' && line.state === 'complete') entries.push(line);
  }
  if (head === undefined) throw new Error('This is no cut: its first line is missing.');

  const collected: Collected = {
    head,
    participants,
    tables: [],
    leftOut: [],
    quasiIdentifiers: [],
    quasiValues: new Map(),
    agesPooled: 0,
  };
  for (const { key, version, hash } of head.instruments) {
    const row = await em.findOneOrFail(InstrumentVersionSchema, { studyId, key, version });
    const compiled = compilePublished(row.schema, instrumentLibrary);
    const own = entries.filter((entry) => entry.instrument === key && entry.version === version);
    const columns = columnsOf(compiled, own, collected);
    const rows = own.map((entry) => {
      const visit = visits.get(`${entry.participant} ${entry.visitType}`);
      const firstDay = firstDays.get(entry.participant);
      const cells = columns.flatMap((column) => cellsOf(column, entry, firstDay, collected));
      const day = visit?.startedAt?.slice(0, 10);
      return {
        participant: entry.participant,
        visitType: entry.visitType ?? '',
        step: entry.step ?? '',
        period: visit?.period == null ? '' : String(visit.period),
        studyDay: day !== undefined && firstDay !== undefined ? studyDayCell(day, firstDay) : null,
        cells,
      };
    });
    collected.tables.push({ key, version, hash, compiled, columns, rows });
  }
  return collected;
}

/** The columns of an instrument: a field each, and one for each reading that was taken. */
function columnsOf(
  compiled: CompiledInstrument,
  entries: readonly CutEntry[],
  collected: Collected,
): Column[] {
  return compiled.fields.flatMap((field): Column[] => {
    const treatment = treatmentOf(field);
    const name = field.pointer.slice(1).replaceAll('/', '.');
    if (treatment.kind === 'leave-out') {
      collected.leftOut.push({ field: `${compiled.title}: ${field.label}`, why: treatment.why });
      return [];
    }
    if (field.visibility.identifying === 'quasi') {
      const words = treatmentWords[treatment.kind];
      collected.quasiIdentifiers.push({ field: `${compiled.title}: ${field.label}`, treatment: words });
    }
    if (field.readings === undefined) return [{ name, address: field.pointer, field, treatment }];
    const taken = entries.map(
      ({ values }) =>
        Object.keys(values).filter((address) => new RegExp(`^${field.pointer}/\\d+$`).test(address)).length,
    );
    return Array.from({ length: Math.max(field.readings.count, ...taken) }, (_, index) => ({
      name: `${name}.${index + 1}`,
      address: `${field.pointer}/${index}`,
      field,
      treatment,
    }));
  });
}

/** The value and, in a companion column, why there is none or why it was set aside (XC-10). */
function cellsOf(
  column: Column,
  entry: CutEntry,
  firstDay: string | undefined,
  collected: Collected,
): [Cell, Cell] {
  const held = entry.values[column.address];
  const rejected = entry.values[`${column.address}!rejected`]?.value;
  const whole = entry.values[column.field.pointer]?.value;
  const value = held?.value;
  if (value === undefined || isMissing(value)) {
    const why = isMissing(value) ? value.missing : isMissing(whole) ? whole.missing : null;
    return [null, why];
  }
  const cell = treated(column, held?.written ?? null, value, firstDay, collected);
  if (column.field.visibility.identifying === 'quasi') {
    const known = collected.quasiValues.get(entry.participant) ?? new Map<string, string>();
    known.set(`${entry.instrument} ${column.address}`, JSON.stringify(cell));
    collected.quasiValues.set(entry.participant, known);
  }
  return [cell, typeof rejected === 'string' ? `set aside: ${rejected}` : null];
}

function treated(
  { treatment }: Column,
  written: string | null,
  value: string | number | boolean | string[],
  firstDay: string | undefined,
  collected: Collected,
): Cell {
  if (treatment.kind === 'study-day') {
    return typeof value === 'string' && firstDay !== undefined
      ? studyDayCell(value.slice(0, 10), firstDay)
      : null;
  }
  if (treatment.kind === 'pool-age' && typeof value === 'number' && value > 89) {
    collected.agesPooled += 1;
    return { number: '90' };
  }
  if (typeof value === 'number') return { number: written ?? String(value) };
  return Array.isArray(value) ? value.join('; ') : String(value);
}

/** Day 1 is the participant's first visit; there is no day 0. */
function studyDayCell(day: string, firstDay: string): Cell {
  const distance = daysBetween(firstDay, day);
  return { number: String(distance < 0 ? distance : distance + 1) };
}
