import { mean, sumOfSquares } from './moments.ts';

/** One-way analysis of variance by subject. */
export interface OneWay {
  subjects: number;
  observations: number;
  mean: number;
  msBetween: number;
  msWithin: number;
  dfWithin: number;
  /** Effective number of values a subject: (N − Σm²/N)/(n − 1). */
  effectiveSize: number;
}

/** Shape: one list of values a subject, none empty, at least two lists and one list of two. */
export function oneWayBySubject(groups: readonly Float64Array[]): OneWay {
  const all = Float64Array.from(groups.flatMap((group) => [...group]));
  const grandMean = mean(all);
  const observations = all.length;
  const subjects = groups.length;
  const dfWithin = observations - subjects;
  const within = groups.reduce((sum, group) => sum + sumOfSquares(group), 0);
  const shift = all[0]!;
  const centre = mean(all.map((value) => value - shift));
  const between = groups.reduce(
    (sum, group) => sum + group.length * (mean(group.map((value) => value - shift)) - centre) ** 2,
    0,
  );
  const sizeSquares = groups.reduce((sum, group) => sum + group.length ** 2, 0);
  return {
    subjects,
    observations,
    mean: grandMean,
    msBetween: between / (subjects - 1),
    msWithin: within / dfWithin,
    dfWithin,
    effectiveSize: (observations - sizeSquares / observations) / (subjects - 1),
  };
}
