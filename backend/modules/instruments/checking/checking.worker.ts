import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import type { EntryValues } from '#schemas/instruments/entry-values.ts';
import type { InstrumentSchema, SampleEntry } from '#schemas/instruments/instrument.ts';
import { checkInstrument, type InstrumentVerdict } from './check-instrument.ts';
import { evaluateEntry, type EntryEvaluation } from './evaluate-entry.ts';
import { instanceValidator } from './instance-validator.ts';
import { instrumentLibrary } from './instrument-library.ts';
import { validatorCode } from './validator-code.ts';

/** What the checking threads are asked. */
export type CheckingTask =
  | { kind: 'check-instrument'; text: string; samples: SampleEntry[]; takenIds: string[] }
  | { kind: 'validator-code'; schema: InstrumentSchema }
  | { kind: 'evaluate-entry'; schema: InstrumentSchema; values: EntryValues; stage: 'open' | 'complete' };

export type CheckingAnswer = InstrumentVerdict | string | EntryEvaluation;

/** Runs in a thread of the pool: what people wrote may take long or fail, and must not take the server with it. */
export default function check(task: CheckingTask): CheckingAnswer {
  switch (task.kind) {
    case 'check-instrument':
      return checkInstrument(task.text, task.samples, instrumentLibrary, task.takenIds);
    case 'validator-code':
      return validatorCode(task.schema);
    case 'evaluate-entry': {
      const { compiled, validator } = prepared(task.schema);
      return evaluateEntry(compiled, validator, instrumentLibrary, task.values, task.stage);
    }
  }
}

const kept = new Map<string, ReturnType<typeof prepare>>();
const most = 50;

/** A published schema does not change: each thread keeps what it has compiled. */
function prepared(schema: InstrumentSchema): ReturnType<typeof prepare> {
  const text = JSON.stringify(schema);
  const known = kept.get(text);
  if (known) return known;
  const made = prepare(schema);
  const [oldest] = kept.keys();
  if (kept.size >= most && oldest !== undefined) kept.delete(oldest);
  kept.set(text, made);
  return made;
}

function prepare(schema: InstrumentSchema) {
  const compiled = compilePublished(schema, instrumentLibrary);
  return { compiled, validator: instanceValidator(compiled) };
}
