/**
 * Time of a linear mixed model with random intercept and slope and Satterthwaite tests, from columns in memory: the
 * fastest of several runs, because other work on the machine only ever adds.
 *
 *   node --import tsx tests/benchmarks/analysis-mixed-model.ts
 *
 * Where Rscript with lme4 and lmerTest is installed the same fit is timed there, inside its own process after start-up
 * and reading. Otherwise the ratio to one plain pass over the rows is printed as a yardstick of the machine.
 */
import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fitMixedModel, type MixedModel } from '#analysis/statistics/mixed-model/fit.ts';
import { inferenceOf } from '#analysis/statistics/mixed-model/inference.ts';

const REPEATS = 15;

const designs = [
  { rows: 10_000, visits: 10, jitter: 0 },
  { rows: 100_000, visits: 10, jitter: 0 },
  { rows: 10_000, visits: 10, jitter: 0.3 },
  { rows: 100_000, visits: 10, jitter: 0.3 },
];

for (const design of designs) {
  const model = simulate(design);
  const own = fastestTime(() => fitAndTest(model));
  const times = design.jitter > 0 ? 'times that differ by subject' : 'common times';
  console.log(`${design.rows} rows, ${design.visits} a subject, ${times}: ${own.toFixed(1)} ms`);
  const inR = timeInR(model);
  if (inR === null) {
    const pass = fastestTime(() => plainPass(model));
    console.log(
      `  R with lme4 and lmerTest is absent; ${(own / pass).toFixed(0)} plain passes over the rows`,
    );
  } else {
    console.log(`  R ${inR.toFixed(0)} ms, ${(inR / own).toFixed(0)} times as long`);
  }
}

type SimulatedModel = MixedModel & { slope: Float64Array };

/** Reaction-time-like data: subjects differ in level and slope, half of them belong to a second group. */
function simulate({ rows, visits, jitter }: (typeof designs)[number]): SimulatedModel {
  const uniform = generator(20240601);
  const normal = () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
  const subjects = Int32Array.from({ length: rows }, (_, row) => Math.floor(row / visits));
  const subjectCount = Math.ceil(rows / visits);
  const levels = Float64Array.from({ length: subjectCount }, () => 25 * normal());
  const slopes = Float64Array.from({ length: subjectCount }, () => 6 * normal());
  const slope = Float64Array.from(subjects, (_, row) => (row % visits) + jitter * uniform());
  const group = Float64Array.from(subjects, (subject) => subject % 2);
  const outcome = Float64Array.from(subjects, (subject, row) => {
    return levels[subject]! + (10 + slopes[subject]!) * slope[row]! + 25 * normal();
  });
  const columns = [
    new Float64Array(rows).fill(1),
    slope,
    group,
    group.map((value, row) => value * slope[row]!),
  ];
  return { outcome, columns, subjects, subjectCount, slope, negligible: 1e-12 };
}

function fitAndTest(model: MixedModel): number {
  const inference = inferenceOf(fitMixedModel(model));
  const p = model.columns.length;
  const tests = model.columns.map((_, i) =>
    inference.contrast(Float64Array.from({ length: p }, (_unused, c) => (c === i ? 1 : 0))),
  );
  return tests[0]!.df;
}

function plainPass({ outcome, columns, slope }: SimulatedModel): number {
  let sum = 0;
  for (let row = 0; row < outcome.length; row += 1) {
    sum += outcome[row]! * slope[row]!;
    for (const column of columns) sum += outcome[row]! * column[row]!;
  }
  return sum;
}

function fastestTime(work: () => number): number {
  const times = Array.from({ length: REPEATS }, () => {
    const start = performance.now();
    if (!Number.isFinite(work())) throw new Error('The timed work gave no number.');
    return performance.now() - start;
  });
  return Math.min(...times);
}

/** Milliseconds of lmer with its summary, or null without R and its packages. */
function timeInR({ outcome, columns, subjects, slope }: SimulatedModel): number | null {
  const probe = spawnSync('Rscript', ['-e', 'library(lme4); library(lmerTest)'], { stdio: 'ignore' });
  if (probe.status !== 0) return null;
  const folder = mkdtempSync(join(tmpdir(), 'vesselry-benchmark-'));
  try {
    const lines = Array.from(outcome, (y, row) => [y, slope[row], columns[2]![row], subjects[row]].join(','));
    writeFileSync(join(folder, 'rows.csv'), `y,x,g,s\n${lines.join('\n')}\n`);
    const script = `
      suppressPackageStartupMessages({ library(lme4); library(lmerTest) })
      d <- read.csv("rows.csv"); d$s <- factor(d$s)
      fit <- function() summary(lmer(y ~ x * g + (1 + x | s), d))
      invisible(suppressWarnings(fit()))
      cat(min(replicate(3, system.time(suppressWarnings(fit()))[["elapsed"]])) * 1000)`;
    return Number(
      execFileSync('Rscript', ['-e', script], {
        cwd: folder,
        encoding: 'utf8',
        stdio: ['ignore', 'pipe', 'ignore'],
      }),
    );
  } finally {
    rmSync(folder, { recursive: true });
  }
}

/** Uniform numbers in [0, 1) from a linear congruential generator: the same data on every machine. */
function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}
