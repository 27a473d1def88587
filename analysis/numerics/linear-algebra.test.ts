import { describe, expect, it } from 'vitest';
import { symmetricEigen } from './linear-algebra-eigen.ts';
import { leastSquares } from './linear-algebra-least-squares.ts';
import {
  bilinearForm,
  choleskyFactor,
  choleskyInverse,
  choleskyLogDeterminant,
  choleskySolve,
  multiply,
} from './linear-algebra.ts';

/** Hilbert matrix: the classical ill-conditioned one, whose inverse has integer elements. */
function hilbert(n: number): Float64Array {
  return Float64Array.from({ length: n * n }, (_, k) => 1 / (Math.floor(k / n) + (k % n) + 1));
}

function factorOf(a: Float64Array, n: number, tolerance = 0): Float64Array {
  const l = choleskyFactor(a, n, tolerance);
  if (typeof l === 'number') throw new Error('not positive definite');
  return l;
}

describe('choleskyFactor', () => {
  it('gives the inverse and the determinant of the Hilbert matrix of order 4 (1/6048000, Choi 1983)', () => {
    const l = factorOf(hilbert(4), 4);
    expect(choleskyLogDeterminant(l, 4)).toBeCloseTo(-Math.log(6048000), 10);
    const known = [
      16, -120, 240, -140, -120, 1200, -2700, 1680, 240, -2700, 6480, -4200, -140, 1680, -4200, 2800,
    ];
    choleskyInverse(l, 4).forEach((value, i) => expect(Math.abs(value / known[i]! - 1)).toBeLessThan(1e-11));
  });

  it('names the first column that depends on earlier ones', () => {
    const x = [
      [1, 1, 2],
      [1, 2, 3],
      [1, 4, 5],
    ];
    const gram = new Float64Array(9);
    for (const row of x) {
      for (let i = 0; i < 3; i += 1) for (let j = 0; j < 3; j += 1) gram[i * 3 + j]! += row[i]! * row[j]!;
    }
    expect(choleskyFactor(gram, 3, 1e-11)).toBe(2);
  });

  it('solves what it factored', () => {
    const a = hilbert(3);
    const x = choleskySolve(factorOf(a, 3), 3, Float64Array.of(1, 2, 3));
    expect(bilinearForm(a, 3, [1, 0, 0], x)).toBeCloseTo(1, 12);
    expect(bilinearForm(a, 3, [0, 0, 1], x)).toBeCloseTo(3, 12);
  });
});

describe('symmetricEigen', () => {
  it('finds 2 - 2 cos(k pi / (n + 1)) for the second-difference matrix', () => {
    const n = 6;
    const a = Float64Array.from({ length: n * n }, (_, k) => {
      const distance = Math.abs(Math.floor(k / n) - (k % n));
      return distance === 0 ? 2 : distance === 1 ? -1 : 0;
    });
    const { values } = symmetricEigen(a, n);
    values.forEach((value, i) =>
      expect(value).toBeCloseTo(2 - 2 * Math.cos(((n - i) * Math.PI) / (n + 1)), 13),
    );
  });

  it('rebuilds the matrix from values and vectors, also when values repeat', () => {
    const a = Float64Array.of(2, 1, 1, 1, 2, 1, 1, 1, 2);
    const { values, vectors } = symmetricEigen(a, 3);
    expect(values[0]).toBeCloseTo(4, 13);
    expect(values[1]).toBeCloseTo(1, 13);
    for (let i = 0; i < 3; i += 1) {
      for (let j = 0; j < 3; j += 1) {
        const rebuilt = values.reduce((sum, value, k) => sum + value * vectors[k]![i]! * vectors[k]![j]!, 0);
        expect(rebuilt).toBeCloseTo(a[i * 3 + j]!, 13);
      }
    }
  });

  it('keeps small eigenvalues of a graded matrix accurate', () => {
    const { values } = symmetricEigen(Float64Array.of(1, 1e-8, 1e-8, 2e-16), 2);
    expect(values[1]! / 1e-16).toBeCloseTo(1, 10);
  });

  it('leaves a matrix of zeros alone', () => {
    expect(symmetricEigen(new Float64Array(4), 2).values).toEqual([0, 0]);
  });
});

describe('multiply', () => {
  it('multiplies by rows and columns', () => {
    expect([...multiply(Float64Array.of(1, 2, 3, 4), Float64Array.of(0, 1, 1, 0), 2)]).toEqual([2, 1, 4, 3]);
  });
});

describe('leastSquares', () => {
  // Straight line by hand: x = 0..3, y = 1, 3, 4, 8: slope 11/5, intercept 7/10, RSS 26 - 24.2 = 1.8.
  const ones = Float64Array.of(1, 1, 1, 1);
  const x = Float64Array.of(0, 1, 2, 3);
  const y = Float64Array.of(1, 3, 4, 8);

  it('fits a straight line as by hand', () => {
    const fit = leastSquares([ones, x], y);
    expect(fit.coefficients[0]).toBeCloseTo(0.7, 13);
    expect(fit.coefficients[1]).toBeCloseTo(2.2, 13);
    expect(fit.residualSumOfSquares).toBeCloseTo(1.8, 13);
    expect(fit.sequentialSumsOfSquares[1]).toBeCloseTo(24.2, 12);
    expect(fit.unscaledCovariance[3]).toBeCloseTo(1 / 5, 14);
    expect(fit.unscaledCovariance[0]).toBeCloseTo(0.7, 14);
  });

  it('leaves a dependent column out and keeps the others', () => {
    const fit = leastSquares([ones, x, x.map((value) => 2 - 3 * value), Float64Array.of(0, 0, 1, 0)], y);
    expect(fit.rank).toBe(3);
    expect(fit.coefficients[2]).toBeNull();
    expect(fit.coefficients[3]).not.toBeNull();
  });

  it('is indifferent to a large common shift of a covariate', () => {
    const fit = leastSquares([ones, x.map((value) => value + 1e5)], y);
    expect(fit.coefficients[1]).toBeCloseTo(2.2, 7);
    expect(fit.residualSumOfSquares).toBeCloseTo(1.8, 7);
  });
});
