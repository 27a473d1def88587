import type { EntityManager } from '@mikro-orm/postgresql';
import { measuredQuantities, type Protocol, type VisitType } from '#schemas/protocol/protocol.ts';
import { canonicalForm } from '#backend/database/trail/canonical.ts';
import {
  entryValues,
  storedValues,
  visitMeasures,
  type StepValues,
  type StoredValue,
} from '../capture/index.ts';
import { EntrySchema, type Entry } from '../capture/entry.entity.ts';
import { DeviationSchema, VisitSchema, type Visit } from '../capture/visit.entity.ts';
import { publishedInstrument, type PublishedInstrument } from '../instruments/index.ts';
import { AllocationSlotSchema } from '../participants/allocation.entity.ts';
import { ParticipantSchema, type Participant } from '../participants/participant.entity.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';
import type { CutEntry, CutHead, CutLine, CutMeasure, CutVisit } from './cut-file.ts';
import { dataHead } from './data-head.ts';
import { rehearse } from './rehearse.ts';

/** What a cut is asked for. */
export interface CutRequest {
  studyId: string;
  kind: 'rehearsal' | 'final';
}

/** Told after each participant. */
export type Report = (done: number, total: number) => Promise<void>;

/**
 * The lines of a cut, in one fixed order: the same state gives the same bytes on any machine.
 * Call it inside one REPEATABLE READ read-only transaction; memory holds one participant at a time,
 * and for a rehearsal the measures, which are permuted among participants.
 */
export async function* cutLines(
  em: EntityManager,
  request: CutRequest,
  report: Report,
): AsyncGenerator<string> {
  const { studyId, kind } = request;
  const study = await em.findOneOrFail(StudySchema, studyId);
  const participants = await em.find(ParticipantSchema, { studyId }, { orderBy: { code: 'asc' } });
  const sites = new Map((await em.find(SiteSchema, { studyId })).map((site) => [site.id, site.code]));
  const slots = await em.find(AllocationSlotSchema, { studyId, participantId: { $ne: null } });
  const sequences = new Map(slots.map((slot) => [slot.participantId, slot.sequenceKey]));
  const protocols = await em.find(ProtocolVersionSchema, { studyId }, { orderBy: { version: 'asc' } });
  const newest = protocols.at(-1);
  if (newest === undefined) throw new Error('A study without a protocol has no cut.');

  const head: CutHead = {
    line: 'study',
    study: study.code,
    kind,
    asOf: await dataHead(em, studyId),
    design: newest.content.design,
    conditions: newest.content.conditions,
    protocols: protocols.map(({ version, hash }) => ({ version, hash })),
    instruments: await instrumentsUsed(em, studyId),
    enrolled: participants.length,
  };
  yield asLine(head);
  const measures: { site: string; unblinding: boolean; measure: CutMeasure }[] = [];
  for (const [index, participant] of participants.entries()) {
    const protocol =
      protocols.find(({ id }) => id === participant.protocolVersionId)?.content ?? newest.content;
    const sequence = sequences.get(participant.id) ?? null;
    const lines = await participantLines(em, participant, {
      protocol,
      sequence,
      kind,
      site: sites.get(participant.siteId) ?? '',
    });
    for (const line of lines.lines) yield asLine(line);
    measures.push(...lines.measures);
    await report(index + 1, participants.length);
  }
  const shown = kind === 'rehearsal' ? rehearse(measures) : measures.map(({ measure }) => measure);
  for (const measure of shown) yield asLine(measure);
}

const asLine = (line: CutLine): string => `${canonicalForm(line)}\n`;

async function instrumentsUsed(em: EntityManager, studyId: string): Promise<CutHead['instruments']> {
  const rows = await em.execute<{ key: string; version: number; hash: string }[]>(
    `select distinct version.key, version.version, version.hash from entry
       join instrument_version as version on version.id = entry.instrument_version_id
      where entry.study_id = ? order by version.key, version.version`,
    [studyId],
  );
  return rows.map(({ key, version, hash }) => ({ key, version, hash }));
}

interface Around {
  protocol: Protocol;
  sequence: string | null;
  site: string;
  kind: CutRequest['kind'];
}

async function participantLines(em: EntityManager, participant: Participant, around: Around) {
  const { studyId, id: participantId, code } = participant;
  const { protocol, sequence, site, kind } = around;
  const visits = await em.find(VisitSchema, { studyId, participantId });
  const entries = await em.find(EntrySchema, { studyId, participantId, state: { $ne: 'void' } });
  const stored = await storedValues(em, studyId, entries);
  const instruments = new Map<string, PublishedInstrument>();
  for (const { instrumentVersionId } of entries) {
    if (!instruments.has(instrumentVersionId)) {
      instruments.set(instrumentVersionId, await publishedInstrument(em, instrumentVersionId));
    }
  }
  const conditionOf = (period: number | null): string | null =>
    period === null || sequence === null
      ? null
      : (protocol.sequences.find(({ key }) => key === sequence)?.conditions[period - 1] ?? null);

  const started = visits
    .flatMap(({ startedAt }) => (startedAt ? [startedAt.toISOString().slice(0, 10)] : []))
    .sort();
  const lines: CutLine[] = [
    {
      line: 'participant',
      participant: code,
      site,
      state: participant.state,
      // Before unblinding not even the code of the sequence leaves the sealed list.
      sequence: kind === 'final' ? sequence : null,
      firstDay: started[0] ?? null,
    },
  ];
  const measures: { site: string; unblinding: boolean; measure: CutMeasure }[] = [];
  for (const type of protocol.visitTypes) {
    const visit = visits.find(({ visitTypeKey }) => visitTypeKey === type.key);
    if (visit === undefined) continue;
    const period = type.period ?? null;
    const condition = conditionOf(period);
    lines.push(visitLine(code, visit, type, kind === 'final' ? condition : null));
    const own = entries
      .filter(({ visitId }) => visitId === visit.id)
      .sort((a, b) => stepIndex(type, a) - stepIndex(type, b));
    for (const entry of own) lines.push(entryLine(code, type.key, entry, stored, instruments, kind));
    for (const { unblinding, ...measure } of measuresOf(visit, type, own, stored, instruments)) {
      measures.push({ site, unblinding, measure: { ...measure, participant: code, period, condition } });
    }
  }
  const logs = entries.filter(({ visitId }) => visitId == null).sort((a, b) => a.id.localeCompare(b.id));
  for (const entry of logs) lines.push(entryLine(code, null, entry, stored, instruments, kind));
  const deviations = await em.find(
    DeviationSchema,
    { studyId, participantId },
    { orderBy: { notedAt: 'asc', id: 'asc' } },
  );
  const typeOfVisit = new Map(visits.map((visit) => [visit.id, visit.visitTypeKey]));
  for (const { visitId, stepKey, origin, level } of deviations) {
    if (kind === 'rehearsal' && level === 'unblinding') continue;
    const visitType = typeOfVisit.get(visitId ?? '') ?? null;
    lines.push({ line: 'deviation', participant: code, visitType, step: stepKey ?? null, origin });
  }
  return { lines, measures };
}

const stepIndex = (type: VisitType, entry: Entry): number =>
  type.runSheet.findIndex(({ key }) => key === entry.stepKey);

const visitLine = (
  participant: string,
  visit: Visit,
  type: VisitType,
  condition: string | null,
): CutVisit => ({
  line: 'visit',
  participant,
  visitType: type.key,
  label: type.label,
  period: type.period ?? null,
  condition,
  state: visit.state,
  missedReason: visit.missedReason ?? null,
  startedAt: visit.startedAt?.toISOString() ?? null,
  endedAt: visit.endedAt?.toISOString() ?? null,
});

function entryLine(
  participant: string,
  visitType: string | null,
  entry: Entry,
  stored: ReadonlyMap<string, StoredValue[]>,
  instruments: ReadonlyMap<string, PublishedInstrument>,
  kind: CutRequest['kind'],
): CutEntry {
  const instrument = instruments.get(entry.instrumentVersionId);
  const values: CutEntry['values'] = {};
  for (const value of stored.get(entry.id) ?? []) {
    const { level, kept } = valueLine(value, instrument);
    if (kind === 'rehearsal' && level === 'unblinding') continue;
    values[value.address] = kept;
  }
  return {
    line: 'entry',
    participant,
    visitType,
    step: entry.stepKey ?? null,
    instrument: entry.instrumentKey,
    version: instrument?.version.version ?? 0,
    state: entry.state,
    revision: entry.revision,
    contentHash: entry.contentHash,
    values,
  };
}

function valueLine(stored: StoredValue, instrument: PublishedInstrument | undefined) {
  const pointer = stored.address.replace(/!rejected$/, '').replace(/\/\d+$/, '');
  const level = instrument?.compiled.field(pointer)?.level ?? ('unblinding' as const);
  return {
    level,
    kept: {
      ...(stored.value === null || stored.redacted ? {} : { value: stored.value }),
      ...(stored.written === null ? {} : { written: stored.written }),
      ...(stored.derivation === null
        ? {}
        : { rule: `${stored.derivation.rule} ${stored.derivation.version}` }),
    },
  };
}

/** What a visit measured; a visit that did not take place says why, once for each measure. */
function measuresOf(
  visit: Visit,
  type: VisitType,
  entries: readonly Entry[],
  stored: ReadonlyMap<string, StoredValue[]>,
  instruments: ReadonlyMap<string, PublishedInstrument>,
): (Omit<CutMeasure, 'participant' | 'period' | 'condition'> & { unblinding: boolean })[] {
  const steps = new Map<string, StepValues>();
  for (const entry of entries) {
    const instrument = instruments.get(entry.instrumentVersionId);
    if (instrument === undefined || entry.state !== 'complete') continue;
    steps.set(entry.stepKey ?? '', {
      compiled: instrument.compiled,
      values: entryValues(stored.get(entry.id) ?? []),
    });
  }
  const notTaken =
    visit.state === 'missed'
      ? `visit missed: ${visit.missedReason ?? ''}`
      : visit.state === 'planned'
        ? 'visit not done'
        : null;
  return visitMeasures(type, steps).map(({ timePoint, quantity, value, waitingFor, unblinding }) => ({
    line: 'measure' as const,
    visitType: type.key,
    timePoint,
    quantity,
    unit: measuredQuantities[quantity],
    value,
    reason: value === null ? (notTaken ?? `${waitingFor} missing`) : null,
    unblinding,
  }));
}
