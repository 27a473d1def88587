import { execFile } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { ms, printTable, ratio, repeated, spread } from './measure.ts';

/**
 * `analyse` from a cold start on a reference case, against Node that starts and does nothing: bare, and with the
 * loader of TypeScript that the command needs.
 *
 * `node --import tsx tests/benchmarks/cold-analyse.ts`
 */
const cwd = fileURLToPath(new URL('../..', import.meta.url));
const reference = 'analysis/reference/statistics/cases/paired_t_sleep';
const run = promisify(execFile);
const times = 15;

const median = async (args: string[]): Promise<number> =>
  spread(await repeated(times, () => run(process.execPath, args, { cwd }), 2)).median;

const own = await median([
  ...['--import', 'tsx', 'analysis/cli/analyse.ts'],
  ...['--plan', `${reference}/plan.json`, '--data', `${reference}/data.csv`],
]);
const loader = await median(['--import', 'tsx', '--eval', '']);
const bare = await median(['--eval', '']);

console.log('A paired comparison from a cold start');
printTable(
  ['process', 'median', 'analyse / it'],
  [
    ['analyse', ms(own), ''],
    ['node with the loader', ms(loader), ratio(own / loader)],
    ['node', ms(bare), ratio(own / bare)],
  ],
);
