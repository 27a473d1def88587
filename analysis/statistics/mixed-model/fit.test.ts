import { describe, expect, it } from 'vitest';
import {
  choleskyFactor,
  choleskyLogDeterminant,
  choleskySolve,
  innerProduct,
} from '../../numerics/linear-algebra.ts';
import { seededRandom } from '../../numerics/random.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { fitMixedModel, type MixedModel, type MixedModelFit } from './fit.ts';
import { inferenceOf } from './inference.ts';

/** Noise without a distribution to speak of: the properties hold for any numbers. */
function noise(seed: number): () => number {
  const source = seededRandom(seed);
  return () => (source.bits() + source.bits() + source.bits()) / 2 ** 32 - 1.5;
}

/** Subjects with different numbers of rows at irregular times. */
function irregular(seed: number, { subjects = 9, between = 2 } = {}): MixedModel & { slope: Float64Array } {
  const next = noise(seed);
  const rows = Array.from({ length: subjects }, (_, subject) => {
    const level = between * next();
    const rate = 0.7 * next();
    return Array.from({ length: 3 + (subject % 4) }, (_unused, k) => {
      const time = k + next() / 4;
      return { subject, time, group: subject % 2, y: level + rate * time + 0.5 * next() + time / 3 };
    });
  }).flat();
  const column = (value: (row: (typeof rows)[number]) => number) => Float64Array.from(rows, value);
  return {
    outcome: column(({ y }) => y),
    columns: [column(() => 1), column(({ time }) => time), column(({ group }) => group)],
    subjects: Int32Array.from(rows, ({ subject }) => subject),
    subjectCount: subjects,
    slope: column(({ time }) => time),
    negligible: 1e-13,
  };
}

/** −2 log likelihood from full covariance matrices, subject by subject: shares nothing with the engine. */
function denseDeviance(
  model: MixedModel,
  theta: { residual: number; v11: number; v21: number; v22: number },
): number {
  const p = model.columns.length;
  const information = new Float64Array(p * p);
  const score = new Float64Array(p);
  let logDeterminant = 0;
  let squares = 0;
  for (let subject = 0; subject < model.subjectCount; subject += 1) {
    const rows = [...model.subjects.keys()].filter((row) => model.subjects[row] === subject);
    const n = rows.length;
    const covariance = Float64Array.from({ length: n * n }, (_, k) => {
      const [i, j] = [rows[Math.floor(k / n)]!, rows[k % n]!];
      const [x, z] = [model.slope?.[i] ?? 0, model.slope?.[j] ?? 0];
      return theta.v11 + theta.v21 * (x + z) + theta.v22 * x * z + (i === j ? theta.residual : 0);
    });
    const l = choleskyFactor(covariance, n) as Float64Array;
    logDeterminant += choleskyLogDeterminant(l, n);
    const y = Float64Array.from(rows, (row) => model.outcome[row]!);
    const weighted = choleskySolve(l, n, y);
    squares += innerProduct(y, weighted);
    const columns = model.columns.map((column) => Float64Array.from(rows, (row) => column[row]!));
    columns.forEach((column, i) => {
      score[i]! += innerProduct(column, weighted);
      const moved = choleskySolve(l, n, column);
      columns.forEach((other, j) => (information[i * p + j]! += innerProduct(other, moved)));
    });
  }
  const l = choleskyFactor(information, p) as Float64Array;
  const residual = squares - innerProduct(choleskySolve(l, p, score), score);
  const isMl = model.estimation === 'ML';
  const free = model.outcome.length - (isMl ? 0 : p);
  return free * Math.log(2 * Math.PI) + logDeterminant + residual + (isMl ? 0 : choleskyLogDeterminant(l, p));
}

function parametersOf({ residualVariance, randomEffects }: MixedModelFit) {
  return {
    residual: residualVariance,
    v11: randomEffects.interceptVariance,
    v21: randomEffects.covariance ?? 0,
    v22: randomEffects.slopeVariance ?? 0,
  };
}

function contrastOf(fit: MixedModelFit, position: number, method?: 'kenward_roger') {
  const weights = Float64Array.from({ length: fit.coefficients.length }, (_, i) => (i === position ? 1 : 0));
  return inferenceOf(fit, method).contrast(weights);
}

function codeOf(work: () => unknown): unknown {
  try {
    work();
  } catch (error) {
    if (error instanceof AnalysisError) return error.code;
    throw error;
  }
  return null;
}

describe('the optimum', () => {
  const structures = [
    { name: 'random intercept', change: { slope: undefined } },
    { name: 'correlated slope', change: {} },
    { name: 'uncorrelated slope', change: { correlated: false } },
    { name: 'correlated slope by maximum likelihood', change: { estimation: 'ML' as const } },
  ];
  for (const { name, change } of structures) {
    it(`is stationary for the likelihood of dense matrices: ${name}`, () => {
      for (const seed of [1, 2, 3]) {
        const model = { ...irregular(seed, { subjects: 12 }), ...change };
        const fit = fitMixedModel(model);
        const theta = parametersOf(fit);
        expect(fit.atBoundary).toBe(false);
        expect(-0.5 * denseDeviance(model, theta)).toBeCloseTo(fit.logLikelihood, 9);
        for (const key of ['residual', 'v11', 'v21', 'v22'] as const) {
          if (theta[key] === 0) continue;
          const step = 1e-4 * Math.abs(theta[key]);
          const slope =
            denseDeviance(model, { ...theta, [key]: theta[key] + step }) -
            denseDeviance(model, { ...theta, [key]: theta[key] - step });
          expect(Math.abs(slope)).toBeLessThan(1e-8);
        }
      }
    });
  }

  it('is no worse than any point of a wide search, also at a boundary and where there are two optima', () => {
    const models = [
      ...Array.from({ length: 20 }, (_, i) => irregular(10 + i, { subjects: 4, between: 0.1 })),
      irregular(399, { subjects: 4, between: 2 }),
      irregular(335, { subjects: 5, between: 0.1 }),
    ];
    const ratios = [0, 0.01, 0.1, 1, 10, 100];
    for (const model of models) {
      const { residualVariance, logLikelihood } = fitMixedModel(model);
      for (const residual of [0.1, 0.3, 0.7, 1, 1.4].map((factor) => factor * residualVariance)) {
        for (const [a, b, r] of ratios.flatMap((x) =>
          ratios.flatMap((y) => [-0.99, 0, 0.99].map((z) => [x, y, z] as const)),
        )) {
          const [v11, v22] = [a * residual, b * residual];
          const theta = { residual, v11, v21: r * Math.sqrt(v11 * v22), v22 };
          expect(-0.5 * denseDeviance(model, theta)).toBeLessThanOrEqual(logLikelihood + 1e-9);
        }
      }
    }
  });
});

describe('balanced data', () => {
  // One-way layout by hand: k subjects of m rows; REML gives the variance components of the analysis of variance.
  const k = 6;
  const m = 4;
  function balanced(seed: number, between: number): MixedModel & { msb: number; msw: number; sst: number } {
    const next = noise(seed);
    const levels = Array.from({ length: k }, () => between * next());
    const outcome = Float64Array.from({ length: k * m }, (_, row) => levels[row % k]! + next());
    const subjects = Int32Array.from(outcome, (_, row) => row % k);
    const mean = outcome.reduce((sum, y) => sum + y, 0) / (k * m);
    const means = levels.map(
      (_, s) => outcome.filter((_y, row) => row % k === s).reduce((sum, y) => sum + y, 0) / m,
    );
    const ssb = m * means.reduce((sum, value) => sum + (value - mean) ** 2, 0);
    const sst = outcome.reduce((sum, y) => sum + (y - mean) ** 2, 0);
    const columns = [new Float64Array(k * m).fill(1)];
    const msw = (sst - ssb) / (k * (m - 1));
    return { outcome, columns, subjects, subjectCount: k, negligible: 0, msb: ssb / (k - 1), msw, sst };
  }

  it('gives the variance components of the one-way analysis of variance by REML', () => {
    const model = balanced(4, 3);
    const fit = fitMixedModel(model);
    expect(fit.residualVariance).toBeCloseTo(model.msw, 11);
    expect(fit.randomEffects.interceptVariance).toBeCloseTo((model.msb - model.msw) / m, 11);
    // The mean has the variance MSB/(km), estimated with k − 1 degrees of freedom.
    const mean = contrastOf(fit, 0);
    expect(mean.standardError).toBeCloseTo(Math.sqrt(model.msb / (k * m)), 11);
    expect(mean.df).toBeCloseTo(k - 1, 7);
    expect(contrastOf(fit, 0, 'kenward_roger').df).toBeCloseTo(k - 1, 7);
  });

  it('divides the sum of squares between subjects by k, not k − 1, by maximum likelihood', () => {
    const model = balanced(4, 3);
    const fit = fitMixedModel({ ...model, estimation: 'ML' });
    expect(fit.residualVariance).toBeCloseTo(model.msw, 11);
    expect(fit.randomEffects.interceptVariance).toBeCloseTo((model.msb * ((k - 1) / k) - model.msw) / m, 11);
  });

  it('is ordinary least squares when subjects differ less than their rows', () => {
    const seed = [...Array(200).keys()].find((s) => balanced(s, 0).msb < 0.8 * balanced(s, 0).msw)!;
    const model = balanced(seed, 0);
    const fit = fitMixedModel(model);
    expect(fit.atBoundary).toBe(true);
    expect(fit.randomEffects.interceptVariance).toBe(0);
    expect(fit.residualVariance).toBeCloseTo(model.sst / (k * m - 1), 11);
    expect(contrastOf(fit, 0).df).toBeCloseTo(k * m - 1, 9);
  });

  it('tests a condition within subjects as the paired t test does', () => {
    const next = noise(8);
    const difference = Float64Array.from({ length: 7 }, () => 1 + next());
    const x = Float64Array.from({ length: 7 }, () => 5 * next());
    const outcome = Float64Array.of(...x, ...x.map((value, i) => value + difference[i]!));
    const subjects = Int32Array.from(outcome, (_, row) => row % 7);
    const columns = [new Float64Array(14).fill(1), Float64Array.from(outcome, (_, row) => (row < 7 ? 0 : 1))];
    const fit = fitMixedModel({ outcome, columns, subjects, subjectCount: 7, negligible: 0 });
    const mean = difference.reduce((sum, d) => sum + d, 0) / 7;
    const variance = difference.reduce((sum, d) => sum + (d - mean) ** 2, 0) / 6;
    for (const test of [contrastOf(fit, 1), contrastOf(fit, 1, 'kenward_roger')]) {
      expect(test.estimate).toBeCloseTo(mean, 11);
      expect(test.standardError).toBeCloseTo(Math.sqrt(variance / 7), 10);
      expect(test.df).toBeCloseTo(6, 6);
    }
  });
});

describe('invariance', () => {
  it('does not depend on the order of rows and subjects', () => {
    const model = irregular(5);
    const order = [...model.outcome.keys()].sort((a, b) => ((a * 7) % 11) - ((b * 7) % 11));
    const pick = (column: Float64Array) => Float64Array.from(order, (row) => column[row]!);
    const shuffled = {
      ...model,
      outcome: pick(model.outcome),
      columns: model.columns.map(pick),
      slope: pick(model.slope),
      subjects: Int32Array.from(order, (row) => model.subjectCount - 1 - model.subjects[row]!),
    };
    const [a, b] = [fitMixedModel(model), fitMixedModel(shuffled)];
    expect(b.logLikelihood).toBeCloseTo(a.logLikelihood, 11);
    expect(b.randomEffects.correlation).toBeCloseTo(a.randomEffects.correlation!, 9);
    expect(contrastOf(b, 1).df).toBeCloseTo(contrastOf(a, 1).df, 7);
  });

  it('scales variances with the square of the unit, down to 1e-9 and up to 1e9', () => {
    const model = irregular(6);
    const fit = fitMixedModel(model);
    for (const unit of [1e-9, 1e9]) {
      const scaled = fitMixedModel({ ...model, negligible: 0, outcome: model.outcome.map((y) => y * unit) });
      expect(scaled.randomEffects.slopeVariance! / unit ** 2 / fit.randomEffects.slopeVariance!).toBeCloseTo(
        1,
        9,
      );
      expect(scaled.randomEffects.correlation).toBeCloseTo(fit.randomEffects.correlation!, 9);
      expect(contrastOf(scaled, 2).df).toBeCloseTo(contrastOf(fit, 2).df, 7);
    }
  });

  it('keeps its digits when an effect within subjects is a million times the noise', () => {
    const model = irregular(7);
    const raised = model.outcome.map((y, row) => y + 1e6 * model.columns[1]![row]!);
    const [a, b] = [fitMixedModel(model), fitMixedModel({ ...model, outcome: raised })];
    expect(b.residualVariance / a.residualVariance).toBeCloseTo(1, 7);
    expect(b.coefficients[1]! - 1e6).toBeCloseTo(a.coefficients[1]!, 7);
  });

  it('moves only the intercept effects when the origin of the slope covariate moves', () => {
    const model = irregular(9);
    const fit = fitMixedModel(model);
    const moved = fitMixedModel({ ...model, slope: model.slope.map((time) => time + 1000) });
    const { slopeVariance, covariance, interceptVariance } = fit.randomEffects;
    expect(moved.logLikelihood).toBeCloseTo(fit.logLikelihood, 9);
    expect(moved.randomEffects.slopeVariance).toBeCloseTo(slopeVariance!, 9);
    expect(moved.randomEffects.covariance).toBeCloseTo(covariance! - 1000 * slopeVariance!, 5);
    const variance = interceptVariance - 2000 * covariance! + 1e6 * slopeVariance!;
    expect(moved.randomEffects.interceptVariance / variance).toBeCloseTo(1, 9);
  });

  it('gives the same test of several rows for any basis of them by Kenward and Roger', () => {
    const inference = inferenceOf(fitMixedModel(irregular(11, { subjects: 12 })), 'kenward_roger');
    const a = inference.test([Float64Array.of(0, 1, 0), Float64Array.of(0, 0, 1)]);
    const b = inference.test([Float64Array.of(0, 1, 1), Float64Array.of(0, 2, -1)]);
    expect(b.f).toBeCloseTo(a.f, 10);
    expect(b.df2).toBeCloseTo(a.df2, 8);
  });
});

describe('boundaries and refusals', () => {
  it('reports a correlation of plus or minus one when the covariance of intercept and slope is singular', () => {
    const fits = [...Array(60).keys()].map((seed) => fitMixedModel(irregular(100 + seed, { subjects: 5 })));
    const singular = fits.filter((fit) => fit.free.length === 2);
    expect(singular.length).toBeGreaterThan(3);
    for (const { randomEffects, atBoundary } of singular) {
      expect(atBoundary).toBe(true);
      expect(Math.abs(randomEffects.correlation!)).toBe(1);
      const { interceptVariance, slopeVariance, covariance } = randomEffects;
      expect(covariance! ** 2 / (interceptVariance * slopeVariance!)).toBeCloseTo(1, 10);
    }
  });

  it('has no correlation when both variances are zero', () => {
    const fits = [...Array(80).keys()].map((seed) => {
      const next = noise(seed);
      const model = irregular(seed, { subjects: 5 });
      return fitMixedModel({ ...model, outcome: model.outcome.map(() => next()) });
    });
    const none = fits.find((fit) => fit.free.length === 0)!;
    expect(none.randomEffects).toEqual({
      interceptVariance: 0,
      slopeVariance: 0,
      covariance: 0,
      correlation: null,
    });
    expect(contrastOf(none, 1).df).toBeCloseTo(none.statistics.rows - 3, 8);
  });

  it('refuses a fixed part whose columns depend on each other', () => {
    const model = irregular(1);
    const columns = [...model.columns, model.columns[1]!.map((time) => 2 * time - 1)];
    expect(codeOf(() => fitMixedModel({ ...model, columns }))).toBe('invalid_plan');
  });

  it('refuses a slope that does not vary, and rows no more than random effects', () => {
    const model = irregular(1);
    expect(codeOf(() => fitMixedModel({ ...model, slope: model.slope.map(() => 3) }))).toBe('invalid_plan');
    const outcome = Float64Array.of(1, 3, 2, 5, 3, 3);
    const subjects = Int32Array.of(0, 0, 1, 1, 2, 2);
    const slope = Float64Array.of(0, 1, 0, 1, 0, 1);
    const columns = [new Float64Array(6).fill(1)];
    const two = { outcome, columns, subjects, subjectCount: 3, slope, negligible: 0 };
    expect(codeOf(() => fitMixedModel(two))).toBe('too_few_replicates');
  });
});
