/** Nodes (positive half) and weights of Gauss and Legendre's rule with 20 points; A & S 1964, table 25.4. */
const { nodes, weights } = gaussLegendre(20);

/**
 * Definite integral of a smooth function by Gauss–Legendre panels that are halved until two levels agree.
 *
 * Shape    f: (x) → number, finite on [low, high]
 * Domain   low at most high, both finite
 * Accuracy relative `tolerance` of the whole where f keeps one sign; 40 halvings at most
 */
export function integrate(f: (x: number) => number, low: number, high: number, tolerance = 1e-13): number {
  const whole = panel(f, low, high);
  return refine(f, low, high, whole, tolerance, Math.abs(whole), 40);
}

function refine(
  f: (x: number) => number,
  low: number,
  high: number,
  coarse: number,
  tolerance: number,
  scale: number,
  depth: number,
): number {
  const middle = 0.5 * (low + high);
  const left = panel(f, low, middle);
  const right = panel(f, middle, high);
  const fine = left + right;
  const total = Math.max(scale, Math.abs(fine));
  if (depth === 0 || Math.abs(fine - coarse) <= tolerance * total) return fine;
  return (
    refine(f, low, middle, left, tolerance, total, depth - 1) +
    refine(f, middle, high, right, tolerance, total, depth - 1)
  );
}

function panel(f: (x: number) => number, low: number, high: number): number {
  const centre = 0.5 * (low + high);
  const half = 0.5 * (high - low);
  let sum = 0;
  for (let i = 0; i < nodes.length; i += 1) {
    const offset = half * nodes[i]!;
    sum += weights[i]! * (f(centre - offset) + f(centre + offset));
  }
  return half * sum;
}

/** Roots of the Legendre polynomial by Newton's method, weights 2/((1 − x²)P′(x)²); A & S 25.4.29. */
function gaussLegendre(points: number): { nodes: number[]; weights: number[] } {
  const result = { nodes: [] as number[], weights: [] as number[] };
  for (let i = 1; i <= points / 2; i += 1) {
    let x = Math.cos((Math.PI * (i - 0.25)) / (points + 0.5));
    let slope = 1;
    for (let step = 0; step < 6; step += 1) {
      let previous = 1;
      let value = x;
      for (let k = 2; k <= points; k += 1) {
        [previous, value] = [value, ((2 * k - 1) * x * value - (k - 1) * previous) / k];
      }
      slope = (points * (x * value - previous)) / (x * x - 1);
      x -= value / slope;
    }
    result.nodes.push(x);
    result.weights.push(2 / ((1 - x * x) * slope * slope));
  }
  return result;
}
