import { boundsProblem, referenceProblem } from '#schemas/instruments/bounds.ts';
import { compileInstrument } from '#schemas/instruments/compile-instrument.ts';
import type { InstrumentProblem, InstrumentSchema, SampleEntry } from '#schemas/instruments/instrument.ts';
import { instrumentLimits } from '#schemas/instruments/limits.ts';
import type { QuantityLibrary } from '#schemas/instruments/quantity-library.ts';
import { contentProblems } from './check-content.ts';
import { keywordProblems } from './check-keywords.ts';
import { evaluateEntry } from './evaluate-entry.ts';
import { instanceValidator } from './instance-validator.ts';
import { runSamples, type SampleResult } from './run-samples.ts';

/** What a draft is worth: it may be published when there are no problems and each sample came out as expected. */
export interface InstrumentVerdict {
  publishable: boolean;
  problems: InstrumentProblem[];
  warnings: InstrumentProblem[];
  samples: SampleResult[];
}

/**
 * Checks a draft from its text to its samples. Each stage runs only when the ones before found nothing, because it
 * relies on them. What an author writes is evaluated here: run it in the pool (`checking.pool.ts`).
 *
 * @param takenIds `$id`s of published versions, which a new one may not shadow (IV-06)
 */
export function checkInstrument(
  text: string,
  samples: SampleEntry[],
  library: QuantityLibrary,
  takenIds: readonly string[] = [],
): InstrumentVerdict {
  const parsed = parseText(text);
  if ('problem' in parsed) return refused([parsed.problem]);
  const { schema } = parsed;
  const keywords = keywordProblems(schema);
  if (keywords.length > 0) return refused(keywords);
  const instrument = schema as InstrumentSchema;
  const references = referenceProblem(instrument);
  if (references) return refused([references]);
  const content = [...contentProblems(instrument), ...shadowedId(instrument, takenIds)];
  const compiled = compileInstrument(instrument, library);
  if ('problems' in compiled) return refused([...content, ...compiled.problems]);
  if (content.length > 0) return { ...refused(content), warnings: compiled.warnings };

  const validator = instanceValidator(compiled);
  const results = runSamples(samples, ({ values }) =>
    evaluateEntry(compiled, validator, library, values, 'complete'),
  );
  const publishable = results.every(({ passed }) => passed);
  return { publishable, problems: [], warnings: compiled.warnings, samples: results };
}

/** Reads a draft's text within its bounds. */
export function parseText(text: string): { schema: unknown } | { problem: InstrumentProblem } {
  if (text.length > instrumentLimits.characters) {
    const message = `An instrument has at most ${instrumentLimits.characters} characters, this has ${text.length}`;
    return { problem: { pointer: '', message } };
  }
  let schema: unknown;
  try {
    schema = JSON.parse(text);
  } catch (error) {
    return { problem: { pointer: '', message: `This is not JSON: ${(error as Error).message}` } };
  }
  const problem = boundsProblem(schema);
  return problem ? { problem } : { schema };
}

function refused(problems: InstrumentProblem[]): InstrumentVerdict {
  return { publishable: false, problems, warnings: [], samples: [] };
}

/** Two `$id`s that differ in case, in percent-encoding or in a trailing # or slash would be taken for each other. */
function shadowedId({ $id }: InstrumentSchema, takenIds: readonly string[]): InstrumentProblem[] {
  if ($id === undefined) return [];
  const plain = (id: string) =>
    decodeSafely(id)
      .normalize('NFKC')
      .toLowerCase()
      .replace(/[#/]+$/, '');
  const taken = takenIds.find((id) => plain(id) === plain($id));
  return taken === undefined
    ? []
    : [{ pointer: '/$id', message: `${taken} is published already: give this version its own $id, or none` }];
}

function decodeSafely(id: string): string {
  try {
    return decodeURIComponent(id);
  } catch {
    return id; // Not percent-encoded: it is compared as it stands.
  }
}
