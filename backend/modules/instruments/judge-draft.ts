import type { EntityManager } from '@mikro-orm/postgresql';
import type { VerdictDto } from '#schemas/api/instruments.ts';
import type { InstrumentProblem, InstrumentSchema, SampleEntry } from '#schemas/instruments/instrument.ts';
import { jsonPlaces } from '#schemas/json/json-places.ts';
import { canonicalHash } from '#backend/database/trail/canonical.ts';
import { checkDraft } from './checking/checking.pool.ts';
import { compareInstruments, unitProblems } from './compare-instruments.ts';
import { jsonProblems, placedProblem } from './text-problems.ts';
import { InstrumentVersionSchema, type InstrumentVersion } from './instrument.entity.ts';

/** A draft's text with its samples, and the instrument it is a draft of. */
export interface JudgedDraft {
  studyId: string;
  key: string;
  text: string;
  samples: SampleEntry[];
}

export interface Judgement extends Omit<VerdictDto, 'validatorHash'> {
  /** The schema and its hash once the text has no problems. */
  instrument: { schema: InstrumentSchema; hash: string } | null;
  /** Every published version of this key, oldest first. */
  published: InstrumentVersion[];
}

/** Judges a draft whole: its text, its samples, what it changes, and whether it may be published. */
export async function judgeDraft(em: EntityManager, draft: JudgedDraft): Promise<Judgement> {
  const { studyId, key, text, samples } = draft;
  const published = await em.find(InstrumentVersionSchema, { studyId, key }, { orderBy: { version: 'asc' } });
  const places = jsonPlaces(text);
  const judgement = { samples: [], differences: [], instrument: null, published, publishable: false };
  if (places.problems.length > 0) {
    return { ...judgement, problems: jsonProblems(text, places) };
  }
  const verdict = await checkDraft(text, samples, { takenIds: await takenIds(em, studyId) });
  const own =
    verdict.problems.length === 0 ? ownProblems(JSON.parse(text) as InstrumentSchema, key, published) : [];
  const problems = [
    ...[...verdict.problems, ...own].map((problem) => placedProblem(text, places, problem, 'error')),
    ...verdict.warnings.map((warning) => placedProblem(text, places, warning, 'warning')),
  ];
  if (verdict.problems.length + own.length > 0) return { ...judgement, problems };
  const schema = JSON.parse(text) as InstrumentSchema;
  const newest = published.at(-1);
  return {
    publishable: verdict.publishable && samples.length > 0,
    problems,
    samples: verdict.samples,
    differences: newest === undefined ? [] : compareInstruments(newest.schema, schema),
    instrument: { schema, hash: canonicalHash(schema) },
    published,
  };
}

/** What a draft may not change about the instrument it is a draft of. */
function ownProblems(
  schema: InstrumentSchema,
  key: string,
  published: readonly InstrumentVersion[],
): InstrumentProblem[] {
  const renamed = schema.instrumentKey !== key;
  const message = `This is a draft of ${key}: the key stays; begin a new instrument for another one`;
  return [
    ...(renamed ? [{ pointer: '/instrumentKey', message }] : []),
    ...unitProblems(
      published.map((version) => version.schema),
      schema,
    ),
  ];
}

/** The `$id`s that versions of the study have taken (IV-06). */
async function takenIds(em: EntityManager, studyId: string): Promise<string[]> {
  const rows = await em.execute<{ id: string }[]>(
    `select distinct schema->>'$id' as id from instrument_version where study_id = ? and schema->>'$id' is not null`,
    [studyId],
  );
  return rows.map(({ id }) => id);
}
