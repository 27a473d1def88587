import {
  numberList,
  roundTo,
  sampleStandardDeviation,
  median,
  mean,
  minutesBetween,
} from './function-bodies.ts';

/** A function that an expression may call, with the line that help and completion show. */
interface ExpressionFunction {
  signature: string;
  help: string;
  body: (...values: never[]) => unknown;
}

/**
 * Functions added to CEL, which has no mathematics of its own.
 * Lists are readings; each body throws a sentence for a person where no number exists.
 */
export const expressionFunctions: readonly ExpressionFunction[] = [
  { signature: 'mean(list<double>): double', help: 'Arithmetic mean', body: mean },
  { signature: 'median(list<double>): double', help: 'Median', body: median },
  {
    signature: 'sd(list<double>): double',
    help: 'Standard deviation with n − 1; needs two readings',
    body: sampleStandardDeviation,
  },
  {
    signature: 'min(list<double>): double',
    help: 'Smallest',
    body: (list: unknown) => Math.min(...numberList('min', list, 1)),
  },
  {
    signature: 'max(list<double>): double',
    help: 'Largest',
    body: (list: unknown) => Math.max(...numberList('max', list, 1)),
  },
  {
    signature: 'min(double, double): double',
    help: 'Smaller of two',
    body: (a: number, b: number) => Math.min(a, b),
  },
  {
    signature: 'max(double, double): double',
    help: 'Larger of two',
    body: (a: number, b: number) => Math.max(a, b),
  },
  { signature: 'abs(double): double', help: 'Size without sign', body: (x: number) => Math.abs(x) },
  { signature: 'sqrt(double): double', help: 'Square root', body: (x: number) => Math.sqrt(x) },
  { signature: 'log(double): double', help: 'Natural logarithm', body: (x: number) => Math.log(x) },
  { signature: 'exp(double): double', help: 'e to the power', body: (x: number) => Math.exp(x) },
  {
    signature: 'round(double): double',
    help: 'Nearest whole number, halves away from zero',
    body: (x: number) => roundTo(x, 0n),
  },
  {
    signature: 'round(double, int): double',
    help: 'Rounded to so many decimals, halves away from zero',
    body: (x: number, decimals: bigint) => roundTo(x, decimals),
  },
  {
    signature: 'eachAbove(list<double>, list<double>): bool',
    help: 'Each reading of the first lies above its partner in the second',
    body: (upper: unknown, lower: unknown) => {
      const floor = numberList('eachAbove', lower, 0);
      return numberList('eachAbove', upper, 0).every((value, index) => {
        const partner = floor[index];
        return partner === undefined || value > partner;
      });
    },
  },
  {
    signature: 'minutesBetween(string, string): double',
    help: 'Minutes from one clock time (09:05) to a later one of the same day; negative when earlier',
    body: minutesBetween,
  },
];

/** What of CEL itself may be called. The rest (`matches`, `split`, `timestamp` …) has no bound on time or size. */
export const allowedCelCalls = new Set([
  ...['size', 'double', 'int', 'string'],
  ...['contains', 'startsWith', 'endsWith', 'lowerAscii', 'trim'],
]);

/** Calls that bind a name and go over a list. */
export const macroCalls = new Set(['all', 'exists', 'exists_one', 'map', 'filter']);

export const ownCalls = new Set(
  expressionFunctions.map(({ signature }) => signature.slice(0, signature.indexOf('('))),
);
