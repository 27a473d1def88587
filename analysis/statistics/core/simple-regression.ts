import { mean, sumOfProducts, sumOfSquares } from './moments.ts';
import { tTest, type TTest } from './t-test.ts';

/** Least squares of y on one x that varies; at least 3 points. */
export interface SimpleRegression extends TTest {
  slope: number;
  slopeSe: number;
  intercept: number;
}

export function regressOn(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  { confidence }: { confidence: number },
): SimpleRegression {
  const df = y.length - 2;
  const squaresX = sumOfSquares(x);
  const slope = sumOfProducts(x, y) / squaresX;
  const [meanX, meanY] = [mean(x), mean(y)];
  const residuals = Float64Array.from(y, (value, i) => value - meanY - slope * (x[i]! - meanX));
  const slopeSe = Math.sqrt(sumOfSquares(residuals) / df / squaresX);
  return { slope, slopeSe, intercept: meanY - slope * meanX, ...tTest(slope, slopeSe, df, { confidence }) };
}
