import { readFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { analyse } from '../statistics/analyse.ts';
import { AnalysisError, invalidPlan } from '../statistics/core/analysis-error.ts';

const usage =
  'Usage: analyse --plan plan.json [--data data.csv], or analyse --batch with one {"id","plan","csv"} a line.';

/** One object on standard output and nothing else; exit code 0 for a result, 2 for bad input, 1 for a defect. */
function main(): void {
  const options = readArguments();
  if (options.batch) return answerLines();
  const { exitCode, output } = answer(() => analyse(readPlan(options.plan), readData(options.data)));
  process.stdout.write(`${JSON.stringify(output)}\n`);
  process.exitCode = exitCode;
}

interface Answer {
  exitCode: 0 | 1 | 2;
  output: unknown;
}

function answer(work: () => unknown): Answer {
  try {
    return { exitCode: 0, output: work() };
  } catch (error) {
    if (error instanceof AnalysisError) return { exitCode: 2, output: error };
    process.stderr.write(`${error instanceof Error ? error.stack : String(error)}\n`);
    return {
      exitCode: 1,
      output: { error: { code: 'defect', message: 'The analysis failed for a reason of its own.' } },
    };
  }
}

function readArguments(): { plan?: string; data?: string; batch?: boolean } {
  try {
    const { values } = parseArgs({
      options: { plan: { type: 'string' }, data: { type: 'string' }, batch: { type: 'boolean' } },
    });
    return values;
  } catch {
    return {};
  }
}

function readPlan(path: string | undefined): unknown {
  if (path === undefined) throw invalidPlan(usage);
  const text = readUtf8(path, invalidPlan('The plan file cannot be read.'));
  try {
    return JSON.parse(text);
  } catch {
    throw invalidPlan('The plan file is not JSON.');
  }
}

function readData(path: string | undefined): string | null {
  if (path === undefined) return null;
  return readUtf8(
    path,
    new AnalysisError('malformed_csv', {}, 'The data file cannot be read as UTF-8 text.'),
  );
}

function readUtf8(path: string, refusal: AnalysisError): string {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(readFileSync(path));
  } catch {
    throw refusal;
  }
}

/** Batch mode: each line is answered at once, in order. Lines end with LF; JSON text may hold other separators. */
function answerLines(): void {
  let rest = '';
  process.stdin.setEncoding('utf8');
  process.stdin.on('data', (chunk: string) => {
    const [first = '', ...others] = chunk.split('\n');
    rest += first;
    for (const line of others) {
      answerLine(rest);
      rest = line;
    }
  });
  process.stdin.on('end', () => {
    if (rest !== '') answerLine(rest);
  });
}

function answerLine(line: string): void {
  const request = readRequest(line);
  const { exitCode, output } = answer(() => {
    if (request === null) throw invalidPlan('The line is not an object with "id", "plan" and "csv".');
    return analyse(request.plan, request.csv);
  });
  process.stdout.write(`${JSON.stringify({ id: request?.id ?? null, exit_code: exitCode, output })}\n`);
}

function readRequest(line: string): { id: unknown; plan: unknown; csv: string | null } | null {
  let value: unknown;
  try {
    value = JSON.parse(line);
  } catch {
    return null;
  }
  if (typeof value !== 'object' || value === null || !('id' in value && 'plan' in value && 'csv' in value))
    return null;
  const { id, plan, csv } = value;
  return csv === null || typeof csv === 'string' ? { id, plan, csv } : null;
}

main();
