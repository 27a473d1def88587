import { createRequire } from 'node:module';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { Piscina } from 'piscina';
import type { EntryValues } from '#schemas/instruments/entry-values.ts';
import type { InstrumentSchema, SampleEntry } from '#schemas/instruments/instrument.ts';
import { parseText, type InstrumentVerdict } from './check-instrument.ts';
import type { CheckingAnswer, CheckingTask } from './checking.worker.ts';
import type { EntryEvaluation } from './evaluate-entry.ts';

/** Longest time for one task in milliseconds, the start of a thread included (WS-10). */
const usualLimit = 10_000;

const threads = 2;

/** What an author wrote took longer than the limit, and was ended. */
class TooSlow extends Error {}

let pool: Piscina<CheckingTask, CheckingAnswer> | undefined;

/**
 * Checks a draft off the main thread, with a time limit.
 * Size and depth are looked at here first: copying ten thousand levels to a thread would already exhaust the stack.
 */
export async function checkDraft(
  text: string,
  samples: SampleEntry[],
  { takenIds = [], timeLimit = usualLimit }: { takenIds?: string[]; timeLimit?: number } = {},
): Promise<InstrumentVerdict> {
  const refused = (message: string, pointer = ''): InstrumentVerdict => {
    return { publishable: false, problems: [{ pointer, message }], warnings: [], samples: [] };
  };
  const parsed = parseText(text);
  if ('problem' in parsed) return refused(parsed.problem.message, parsed.problem.pointer);
  try {
    return (await run({ kind: 'check-instrument', text, samples, takenIds }, timeLimit)) as InstrumentVerdict;
  } catch (error) {
    if (error instanceof TooSlow) return refused(error.message);
    throw error;
  }
}

/** Makes the browser's validator of a checked schema off the main thread. */
export async function makeValidatorCode(schema: InstrumentSchema): Promise<string> {
  return (await run({ kind: 'validator-code', schema })) as string;
}

/** Judges and derives an entry off the main thread; throws `TooSlow` past the limit. */
export async function evaluateEntryInThread(
  schema: InstrumentSchema,
  values: EntryValues,
  stage: 'open' | 'complete',
): Promise<EntryEvaluation> {
  return (await run({ kind: 'evaluate-entry', schema, values, stage })) as EntryEvaluation;
}

/** Ends the threads, at the end of the process or of a test. */
export async function closeCheckingPool(): Promise<void> {
  await pool?.destroy();
  pool = undefined;
}

async function run(task: CheckingTask, timeLimit = usualLimit): Promise<CheckingAnswer> {
  await freeThread();
  // From here the task has a thread: waiting for one does not count.
  const signal = AbortSignal.timeout(timeLimit);
  try {
    return await startedPool().run(task, { signal });
  } catch (error) {
    if (signal.aborted) {
      throw new TooSlow(`The check took more than ${timeLimit / 1000} s and was ended: make it simpler`);
    }
    throw error;
  } finally {
    const next = waiting.shift();
    if (next) next();
    else busy -= 1;
  }
}

let busy = 0;
const waiting: (() => void)[] = [];

async function freeThread(): Promise<void> {
  if (busy < threads) busy += 1;
  // Whoever ends hands its thread over.
  else await new Promise<void>((resolve) => waiting.push(resolve));
}

function startedPool(): Piscina<CheckingTask, CheckingAnswer> {
  pool ??= new Piscina<CheckingTask, CheckingAnswer>({
    filename: fileURLToPath(new URL('./checking.worker.ts', import.meta.url)),
    // A test runner does not run under tsx; the server does, and naming it twice does no harm.
    execArgv: ['--import', pathToFileURL(createRequire(import.meta.url).resolve('tsx')).href],
    maxThreads: threads,
    idleTimeout: 60_000,
    resourceLimits: { maxOldGenerationSizeMb: 192 },
  });
  return pool;
}
