/**
 * Solves ln tail(exp(u)) = ln probability for x = exp(u) by Newton steps held inside a shrinking bracket.
 *
 * Working in logarithms of both keeps relative accuracy for quantiles and probabilities of any size.
 * Shape    `tail` monotone in x on (0, ∞), `slope` = x·density(x) (of the side that `tail` counts, both positive)
 * Domain   probability above 0 and below 1; start above 0
 * Accuracy relative 1e-15 times the condition of the problem
 */
export function quantileOfTail(options: {
  tail: (x: number) => number;
  slope: (x: number) => number;
  probability: number;
  rising: boolean;
  start: number;
}): number {
  const { tail, slope, probability, rising } = options;
  const target = Math.log(probability);
  const sign = rising ? 1 : -1;
  let low = -745;
  let high = 709;
  let u = Math.min(Math.max(Math.log(options.start), low), high);
  for (let i = 0; i < 300; i += 1) {
    const x = Math.exp(u);
    const value = tail(x);
    const gap = sign * (Math.log(value) - target);
    if (gap > 0) high = u;
    else low = u;
    if (gap === 0) return x;
    const newton = u - (gap * value) / slope(x);
    const inside = newton > low && newton < high;
    const next = inside ? newton : 0.5 * (low + high);
    if (Math.abs(next - u) <= 1e-16 * Math.max(1, Math.abs(u)) || high - low < 1e-15) return Math.exp(next);
    u = next;
  }
  return Math.exp(u);
}
