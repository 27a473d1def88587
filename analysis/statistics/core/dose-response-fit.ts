import { fitCurve, type Curve, type CurveFit } from './nonlinear-fit.ts';

export type DoseResponseModel = 'emax' | 'log_logistic';

/** A fitted dose–response curve in the parameters as written in the contract. */
export interface DoseResponseFit {
  parameters: { name: string; value: number; unscaledVariance: number }[];
  residualSumOfSquares: number;
}

/**
 * Least-squares fit of e0 + emax·x/(ed50 + x) or emax/(1 + (ed50/x)^hill); null where no start converges.
 *
 * Method   doses and responses are scaled to about 1; from a grid of ed50 (and hill, both signs), with the parameters
 *          that enter linearly solved for, every local minimum of the grid starts a fit; the best that converges wins
 * Domain   ed50 above 0; at dose 0 the log-logistic curve is 0 for hill > 0, emax for hill < 0
 */
export function fitDoseResponse(
  x: Float64Array,
  y: Float64Array,
  model: DoseResponseModel,
): DoseResponseFit | null {
  const positive = x.filter((dose) => dose > 0).sort();
  if (positive.length === 0) return null;
  const unitX = positive[positive.length >> 1]!;
  const shift = model === 'emax' ? y[0]! : 0;
  const unitY = y.reduce((largest, value) => Math.max(largest, Math.abs(value - shift)), 0);
  if (unitY === 0) return null;
  const scaledX = x.map((dose) => dose / unitX);
  const scaledY = y.map((value) => (value - shift) / unitY);
  const { curve, starts, describe } = models[model];
  let best: CurveFit | null = null;
  for (const start of starts(scaledX, scaledY)) {
    const fit = fitCurve(curve, scaledX, scaledY, start);
    if (fit && (best === null || fit.residualSumOfSquares < best.residualSumOfSquares)) best = fit;
  }
  if (best === null) return null;
  const { parameters, unscaledCovariance, residualSumOfSquares } = best;
  const described = describe({ unitX, unitY, shift }).map(({ name, unit, offset }, j) => ({
    name,
    value: offset + unit * parameters[j]!,
    unscaledVariance: (unit / unitY) ** 2 * unscaledCovariance[j * 4]!,
  }));
  return { parameters: described, residualSumOfSquares: residualSumOfSquares * unitY ** 2 };
}

interface Units {
  unitX: number;
  unitY: number;
  shift: number;
}

interface Model {
  curve: Curve;
  starts: (x: Float64Array, y: Float64Array) => number[][];
  describe: (units: Units) => { name: string; unit: number; offset: number }[];
}

const models: Record<DoseResponseModel, Model> = {
  emax: {
    curve: {
      evaluate(x, [e0, emax, ed50], gradient) {
        const share = x / (ed50! + x);
        gradient[0] = 1;
        gradient[1] = share;
        gradient[2] = (-emax! * share) / (ed50! + x);
        return e0! + emax! * share;
      },
      isInside: ([, , ed50]) => ed50! > 1e-9 && ed50! < 1e9,
    },
    starts: (x, y) =>
      lowestOf(
        [logSteps(1e-4, 1e4, 81)],
        ([ed50]) => linearInShare(x, y, (dose) => dose / (ed50! + dose)),
        (linear, [ed50]) => [linear.intercept, linear.slope, ed50!],
      ),
    describe: ({ unitX, unitY, shift }) => [
      { name: 'e0', unit: unitY, offset: shift },
      { name: 'emax', unit: unitY, offset: 0 },
      { name: 'ed50', unit: unitX, offset: 0 },
    ],
  },
  log_logistic: {
    curve: {
      evaluate(x, [emax, ed50, hill], gradient) {
        const share = logLogisticShare(x, ed50!, hill!);
        const rise = share * (1 - share);
        gradient[0] = share;
        gradient[1] = (-emax! * rise * hill!) / ed50!;
        gradient[2] = x > 0 ? emax! * rise * Math.log(x / ed50!) : 0;
        return emax! * share;
      },
      isInside: ([, ed50, hill]) => ed50! > 1e-9 && ed50! < 1e9 && Math.abs(hill!) < 1e3,
    },
    starts: (x, y) =>
      lowestOf(
        [
          logSteps(1e-3, 1e3, 33),
          [
            ...logSteps(0.1, 30, 12)
              .map((hill) => -hill)
              .reverse(),
            ...logSteps(0.1, 30, 12),
          ],
        ],
        ([ed50, hill]) => proportionalToShare(x, y, (dose) => logLogisticShare(dose, ed50!, hill!)),
        (linear, [ed50, hill]) => [linear.slope, ed50!, hill!],
      ),
    describe: ({ unitX, unitY }) => [
      { name: 'emax', unit: unitY, offset: 0 },
      { name: 'ed50', unit: unitX, offset: 0 },
      { name: 'hill', unit: 1, offset: 0 },
    ],
  },
};

function logLogisticShare(x: number, ed50: number, hill: number): number {
  return 1 / (1 + (ed50 / x) ** hill);
}

interface Linear {
  intercept: number;
  slope: number;
  squares: number;
}

function linearInShare(x: Float64Array, y: Float64Array, share: (dose: number) => number): Linear {
  const shares = x.map(share);
  const meanShare = shares.reduce((sum, s) => sum + s, 0) / x.length;
  const meanY = y.reduce((sum, value) => sum + value, 0) / y.length;
  const spread = shares.reduce((sum, s) => sum + (s - meanShare) ** 2, 0);
  const slope = shares.reduce((sum, s, i) => sum + (s - meanShare) * (y[i]! - meanY), 0) / spread;
  const intercept = meanY - slope * meanShare;
  const squares = y.reduce((sum, value, i) => sum + (value - intercept - slope * shares[i]!) ** 2, 0);
  return { intercept, slope, squares };
}

function proportionalToShare(x: Float64Array, y: Float64Array, share: (dose: number) => number): Linear {
  const shares = x.map(share);
  const slope = shares.reduce((sum, s, i) => sum + s * y[i]!, 0) / shares.reduce((sum, s) => sum + s * s, 0);
  const squares = y.reduce((sum, value, i) => sum + (value - slope * shares[i]!) ** 2, 0);
  return { intercept: 0, slope, squares };
}

/** Starting points at the local minima of a grid over one or two parameters, best first. */
function lowestOf(
  axes: readonly (readonly number[])[],
  solve: (point: readonly number[]) => Linear,
  start: (linear: Linear, point: readonly number[]) => number[],
): number[][] {
  const [first = [], second = [NaN]] = axes;
  const cells = first.map((a) => second.map((b) => ({ point: [a, b], linear: solve([a, b]) })));
  const squaresAt = (i: number, j: number) => cells[i]?.[j]?.linear.squares ?? Infinity;
  const minima = cells.flatMap((row, i) =>
    row.filter(({ linear }, j) => {
      const neighbours = [squaresAt(i - 1, j), squaresAt(i + 1, j), squaresAt(i, j - 1), squaresAt(i, j + 1)];
      return Number.isFinite(linear.squares) && neighbours.every((squares) => !(squares < linear.squares));
    }),
  );
  minima.sort((a, b) => a.linear.squares - b.linear.squares);
  return minima.slice(0, 20).map(({ linear, point }) => start(linear, point));
}

function logSteps(from: number, to: number, count: number): number[] {
  const step = Math.log(to / from) / (count - 1);
  return Array.from({ length: count }, (_, i) => from * Math.exp(i * step));
}
