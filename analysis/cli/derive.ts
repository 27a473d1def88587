import { readFileSync } from 'node:fs';
import { deriveCases } from '../quantities/derive-cases.ts';
import { listQuantities } from '../quantities/list-quantities.ts';

/**
 * `npm run --silent derive -- FILE` derives the cases of a JSON file; `-- --list` prints every quantity.
 * One JSON value on standard output. Exit 0 with answers, 2 when the file cannot be read as a list of cases.
 */
process.exitCode = run(process.argv.slice(2));

function run(args: readonly string[]): number {
  const [argument] = args;
  if (argument === undefined || args.length > 1) {
    return fail('invalid_arguments', 'One argument is needed.', 'Give a file of cases, or --list.');
  }
  if (argument === '--list') return print(listQuantities(), 0);
  const read = readCases(argument);
  return 'error' in read ? fail(read.error, read.message, read.remedy) : print(deriveCases(read.cases), 0);
}

function readCases(file: string): { cases: unknown[] } | { error: string; message: string; remedy: string } {
  let text: string;
  try {
    text = readFileSync(file, 'utf8');
  } catch (cause) {
    const reason = cause instanceof Error && 'code' in cause ? String(cause.code) : 'unknown reason';
    return {
      error: 'unreadable_file',
      message: `The file cannot be read (${reason}).`,
      remedy: 'Check path and rights.',
    };
  }
  try {
    const cases: unknown = JSON.parse(text.replace(/^\uFEFF/, ''));
    if (Array.isArray(cases)) return { cases };
    return {
      error: 'invalid_file',
      message: 'The file holds no list.',
      remedy: 'Write a JSON array of cases.',
    };
  } catch (cause) {
    const reason = cause instanceof Error ? cause.message : 'unknown reason';
    return {
      error: 'invalid_file',
      message: `The file is no JSON: ${reason}`,
      remedy: 'Write a JSON array of cases.',
    };
  }
}

function print(answer: unknown, exitCode: number): number {
  process.stdout.write(`${JSON.stringify(answer, null, 1)}\n`);
  return exitCode;
}

function fail(code: string, message: string, remedy: string): number {
  return print({ error: { code, message, remedy } }, 2);
}
