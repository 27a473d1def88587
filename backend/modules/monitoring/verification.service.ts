import type { EntityManager } from '@mikro-orm/postgresql';
import type { VerificationDto, VerificationFieldDto, VerifyBody } from '#schemas/api/monitoring.ts';
import { parseAddress } from '#schemas/instruments/address.ts';
import { act } from '#backend/database/act.ts';
import { currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { invalidBody, Problem, stateForbids, type FieldProblem } from '#backend/http/problem.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { mayKnow, loadVisit, presentValue, storedValues, visitTypeOf } from '../capture/index.ts';
import { EntrySchema, type Entry } from '../capture/entry.entity.ts';
import type { Visit } from '../capture/visit.entity.ts';
import { publishedInstrument } from '../instruments/index.ts';
import { SourceDocumentSchema } from '../source/source-document.entity.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { QuerySchema, VerificationMarkSchema, type VerificationMark } from './monitoring.entity.ts';

/** The fields of a visit in the run sheet's order, each with its mark: what the verification desk shows. */
export async function verificationOf(em: EntityManager, visit: Visit): Promise<VerificationDto> {
  const { studyId, id: visitId } = visit;
  const type = await visitTypeOf(em, visit);
  const entries = await em.find(EntrySchema, { studyId, visitId, state: { $ne: 'void' } });
  const stored = await storedValues(em, studyId, entries);
  const marks = await em.find(VerificationMarkSchema, { studyId, visitId }, { orderBy: { setAt: 'asc' } });
  const people = await em.find(PersonSchema, { id: { $in: marks.map(({ setById }) => setById) } });
  const names = new Map(people.map(({ id, name }) => [id, name]));
  const newest = new Map(marks.map((mark) => [`${mark.entryId}${mark.address}`, mark]));
  const open = await em.find(QuerySchema, { studyId, visitId, state: { $ne: 'settled' } });
  const fields: VerificationFieldDto[] = [];
  for (const step of type.runSheet) {
    const entry = entries.find(({ stepKey }) => stepKey === step.key);
    if (entry === undefined) continue;
    const { compiled } = await publishedInstrument(em, entry.instrumentVersionId);
    for (const value of stored.get(entry.id) ?? []) {
      const field = compiled.field(parseAddress(value.address)?.pointer ?? '');
      if (
        field === undefined ||
        field.derived ||
        value.address.includes('!') ||
        !mayKnow(compiled, value.address)
      )
        continue;
      const mark = newest.get(`${entry.id}${value.address}`);
      const reading = parseAddress(value.address)?.reading;
      fields.push({
        entryId: entry.id,
        revision: entry.revision,
        step: step.label,
        address: value.address,
        label: reading === undefined ? field.label : `${field.label}, reading ${reading + 1}`,
        value: presentValue(compiled, value),
        required: field.source,
        state: mark === undefined ? 'open' : mark.fallenAt == null ? 'verified' : 'fallen',
        mark: mark === undefined ? null : presentMark(mark, names),
        openQueries: open.filter(({ entryId, address }) => entryId === entry.id && address === value.address)
          .length,
      });
    }
  }
  const needed = fields.filter(({ required }) => required);
  return {
    visitId,
    fields,
    needed: needed.length,
    done: needed.filter(({ state }) => state === 'verified').length,
  };
}

const presentMark = (mark: VerificationMark, names: ReadonlyMap<string, string>) => ({
  id: mark.id,
  by: names.get(mark.setById) ?? '',
  at: mark.setAt.toISOString(),
  revision: mark.entryRevision,
  because: mark.fallenBecause ?? null,
});

/** Sets marks: this recorded value, at this revision, agrees with this source file (SV-01, SV-02). */
export async function verify(em: EntityManager, visitId: string, body: VerifyBody): Promise<Visit> {
  const visit = await loadVisit(em, visitId);
  const { studyId } = visit;
  const source = await em.findOne(SourceDocumentSchema, { studyId, id: body.sourceDocumentId, visitId });
  assertReadable('SourceDocument', source, 'This source document');
  const document = source as NonNullable<typeof source>;
  if (document.replacedById != null)
    throw stateForbids('This file was replaced; compare with the newer one.');
  const entries = await em.find(EntrySchema, { studyId, visitId });
  const wanted = await wantedMarks(em, entries, body);
  await act(
    em,
    {
      kind: 'value-verified',
      subject: { type: 'visit', id: visitId, participantId: visit.participantId, siteId: visit.siteId },
    },
    async (tx) => {
      await assertStudyOpen(tx);
      for (const { entry, address, valueId } of wanted) {
        const present = await tx.findOneOrFail(EntrySchema, { studyId, id: entry.id });
        if (present.revision !== entry.revision) throw changed();
        tx.create(VerificationMarkSchema, {
          studyId,
          siteId: visit.siteId,
          visitId,
          entryId: entry.id,
          entryRevision: entry.revision,
          address,
          valueId,
          sourceDocumentId: document.id,
          sourceSha256: document.sha256,
          setById: currentPersonId(),
          setAt: new Date(),
        });
      }
    },
  );
  return visit;
}

const changed = (): Problem =>
  new Problem(412, 'stale-revision', 'An entry changed since you looked at it; load the visit again.');

async function wantedMarks(em: EntityManager, entries: readonly Entry[], body: VerifyBody) {
  const problems: FieldProblem[] = [];
  const wanted: { entry: Entry; address: string; valueId: string }[] = [];
  for (const [index, { entryId, revision, address }] of body.fields.entries()) {
    const entry = entries.find(({ id }) => id === entryId);
    assertReadable('Entry', entry, 'This entry');
    const found = entry as Entry;
    authorize('verify', 'Entry', found, 'Only a completed entry is verified, by a monitor.');
    if (found.revision !== revision) throw changed();
    const { compiled } = await publishedInstrument(em, found.instrumentVersionId);
    const item = found.content[address];
    if (
      item === undefined ||
      !mayKnow(compiled, address) ||
      compiled.field(parseAddress(address)?.pointer ?? '')?.derived
    ) {
      problems.push({ pointer: `/fields/${index}/address`, detail: 'has no value to verify' });
    } else wanted.push({ entry: found, address, valueId: item.value });
  }
  if (problems.length > 0) throw invalidBody(problems);
  return wanted;
}

/** Takes a mark back with a reason; it is kept as fallen and does not come back. */
export async function clearMark(
  em: EntityManager,
  markId: string,
  reason: string,
): Promise<VerificationMark> {
  const mark = await em.findOne(VerificationMarkSchema, { studyId: currentStudyId(), id: markId });
  assertReadable('VerificationMark', mark, 'This mark');
  const found = mark as VerificationMark;
  const entry = await em.findOneOrFail(EntrySchema, { studyId: found.studyId, id: found.entryId });
  authorize('verify', 'Entry', entry);
  if (found.fallenAt != null) throw stateForbids('This mark has fallen already.');
  return act(
    em,
    {
      kind: 'verification-cleared',
      subject: {
        type: 'verification-mark',
        id: markId,
        participantId: entry.participantId,
        siteId: entry.siteId,
      },
      reason,
    },
    async (tx) => {
      await assertStudyOpen(tx);
      const row = await tx.findOneOrFail(VerificationMarkSchema, markId);
      row.fallenAt = new Date();
      row.fallenBecause = 'cleared';
      return row;
    },
  );
}
