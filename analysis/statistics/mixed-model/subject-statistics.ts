import { PatternTable } from './pattern-table.ts';

/** Rows of a mixed model: outcome, columns of the fixed part, and to whom each row belongs. */
export interface MixedModelRows {
  /** One value a row, shifted near zero by the caller. */
  readonly outcome: Float64Array;
  /** Columns of the fixed part, each one value a row, of order one. */
  readonly columns: readonly Float64Array[];
  /** 0 … subjectCount − 1 for each row. */
  readonly subjects: Int32Array;
  readonly subjectCount: number;
  /** Covariate of the random slope, or null for a random intercept only. */
  readonly slope: SlopeCovariate | null;
}

/** The random slope multiplies (value − origin) / unit. */
export interface SlopeCovariate {
  readonly values: Float64Array;
  readonly origin: number;
  readonly unit: number;
}

/**
 * What the likelihood needs to know of the rows, so that evaluating it costs O(subjects), not O(rows).
 *
 * For one subject with random-effects columns Z = QR (Q orthonormal) the inverse covariance is
 * (I − QQ') + Q (I + R Φ R')⁻¹ Q' in units of the residual variance. The first part does not depend on the
 * parameters: its cross-products of all columns and the outcome are summed in `within`. For the second part the
 * cross-products of the two rows of Q'[X y] are kept, and added up over subjects with the same R: subjects seen
 * at the same times share a pattern.
 *
 * Symmetric matrices of order columns + 1 (the outcome last) are packed by rows of the lower triangle.
 */
export interface SubjectStatistics {
  readonly rows: number;
  readonly subjects: number;
  /** Number of columns of the fixed part. */
  readonly columns: number;
  /** Length of a packed matrix. */
  readonly packed: number;
  readonly within: Float64Array;
  /** Dimensions spanned by the random-effects columns, summed over subjects. */
  readonly spanned: number;
  readonly patterns: number;
  /** Subjects in each pattern. */
  readonly counts: Float64Array;
  readonly r11: Float64Array;
  readonly r12: Float64Array;
  readonly r22: Float64Array;
  /** Three packed matrices a pattern: first × first, first × second + second × first, second × second. */
  readonly moments: Float64Array;
}

/** Reduces the rows to `SubjectStatistics`, in one pass over the subjects. */
export function subjectStatistics(rows: MixedModelRows): SubjectStatistics {
  const all = [...rows.columns, rows.outcome];
  const width = all.length;
  const packed = (width * (width + 1)) / 2;
  const { order, starts, longest } = rowsBySubject(rows.subjects, rows.subjectCount);
  const within = new Float64Array(packed);
  const patterns = new PatternTable(rows.subjectCount, width);
  const block = new Float64Array(longest * width);
  const direction = new Float64Array(longest);
  let spanned = 0;
  for (let subject = 0; subject < rows.subjectCount; subject += 1) {
    const start = starts[subject]!;
    const size = starts[subject + 1]! - start;
    for (let k = 0; k < size; k += 1) {
      const row = order[start + k]!;
      for (let c = 0; c < width; c += 1) block[k * width + c] = all[c]![row]!;
    }
    const root = Math.sqrt(size);
    const spread = slopeDirection(rows.slope, order, start, size, direction);
    centre(block, width, size, patterns.first);
    if (spread.length > 0) removeDirection(block, width, size, direction, patterns.second);
    else patterns.second.fill(0);
    addCrossProducts(within, block, width, size);
    patterns.add(root, root * spread.mean, spread.length);
    spanned += spread.length > 0 ? 2 : 1;
  }
  const { subjects, columns } = { subjects: rows.subjectCount, columns: rows.columns.length };
  return { rows: rows.outcome.length, subjects, columns, packed, within, spanned, ...patterns.finish() };
}

/** Row numbers sorted by subject, keeping their order; rows of subject s are at starts[s] … starts[s + 1] − 1. */
function rowsBySubject(subjects: Int32Array, subjectCount: number) {
  const starts = new Int32Array(subjectCount + 1);
  for (const subject of subjects) starts[subject + 1]! += 1;
  let longest = 0;
  for (let s = 0; s < subjectCount; s += 1) {
    longest = Math.max(longest, starts[s + 1]!);
    starts[s + 1]! += starts[s]!;
  }
  const next = starts.slice(0, subjectCount);
  const order = new Int32Array(subjects.length);
  for (let row = 0; row < subjects.length; row += 1) {
    const subject = subjects[row]!;
    order[next[subject]!] = row;
    next[subject]! += 1;
  }
  return { order, starts, longest };
}

/**
 * The slope covariate of one subject: its mean, and the unit vector of its deviations with their length.
 * Deviations are taken from a value of the data, so that a far origin costs no digits.
 */
function slopeDirection(
  slope: SlopeCovariate | null,
  order: Int32Array,
  start: number,
  size: number,
  direction: Float64Array,
): { mean: number; length: number } {
  if (slope === null) return { mean: 0, length: 0 };
  const reference = slope.values[order[start]!]!;
  let sum = 0;
  let varies = false;
  for (let k = 0; k < size; k += 1) {
    const deviation = slope.values[order[start + k]!]! - reference;
    varies ||= deviation !== 0;
    direction[k] = deviation;
    sum += deviation;
  }
  const mean = (reference - slope.origin + sum / size) / slope.unit;
  if (!varies) return { mean, length: 0 };
  let squares = 0;
  for (let k = 0; k < size; k += 1) {
    direction[k]! -= sum / size;
    squares += direction[k]! ** 2;
  }
  const length = Math.sqrt(squares);
  for (let k = 0; k < size; k += 1) direction[k]! /= length;
  return { mean, length: length / slope.unit };
}

/** Centres each column of the block; `along` receives √size times the means. */
function centre(block: Float64Array, width: number, size: number, along: Float64Array): void {
  along.fill(0);
  for (let k = 0; k < size; k += 1) for (let c = 0; c < width; c += 1) along[c]! += block[k * width + c]!;
  for (let c = 0; c < width; c += 1) along[c]! /= size;
  for (let k = 0; k < size; k += 1) for (let c = 0; c < width; c += 1) block[k * width + c]! -= along[c]!;
  for (let c = 0; c < width; c += 1) along[c]! *= Math.sqrt(size);
}

/** Takes a unit vector out of each column of the block; `along` receives the lengths taken out. */
function removeDirection(
  block: Float64Array,
  width: number,
  size: number,
  direction: Float64Array,
  along: Float64Array,
): void {
  along.fill(0);
  for (let k = 0; k < size; k += 1) {
    for (let c = 0; c < width; c += 1) along[c]! += direction[k]! * block[k * width + c]!;
  }
  for (let k = 0; k < size; k += 1) {
    for (let c = 0; c < width; c += 1) block[k * width + c]! -= direction[k]! * along[c]!;
  }
}

function addCrossProducts(packed: Float64Array, block: Float64Array, width: number, size: number): void {
  for (let k = 0; k < size; k += 1) {
    const row = k * width;
    let element = 0;
    for (let i = 0; i < width; i += 1) {
      const value = block[row + i]!;
      for (let j = 0; j <= i; j += 1) {
        packed[element]! += value * block[row + j]!;
        element += 1;
      }
    }
  }
}
