/** A linear combination of coefficients with the t distribution it is judged by. */
export interface Contrast {
  readonly estimate: number;
  readonly standardError: number;
  readonly df: number;
}

/** A test that several linear combinations are all zero. */
export interface FTest {
  readonly f: number;
  readonly df1: number;
  readonly df2: number;
}

/** Inference about the fixed part; a contrast is a row of weights on `MixedModelFit.coefficients`. */
export interface FixedPartInference {
  contrast(weights: Float64Array): Contrast;
  /** Independent rows, at least one. */
  test(rows: readonly Float64Array[]): FTest;
}
