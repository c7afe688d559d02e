import { requireFinite } from "./finite-series.ts";

/**
 * End of the start-up by the marginal standard error rule: the cut that makes the naive standard error of what remains
 * smallest.
 *
 *   d = argmin_{0 <= d <= cutMax} Σ_{i>=d} (x_i − x̄_d)² / (n − d)²
 *
 * Limits: cuts too little when the transient is buried in noise; a cut at the limit means that no end was seen. Of equal
 * minima the earliest is taken. Feed it means of a few samples each, not raw correlated samples.
 *
 * @param x shape [n], n >= 2, finite
 * @param cutMax latest cut, an index <= n − 1; by default half of n
 * @returns index of the first value kept
 * @throws HISTORY_INVALID, NON_FINITE
 * @see White (1997), An effective truncation heuristic; White, Cobb & Spratt (2000)
 */
export function mser(x: Float64Array, cutMax = Math.floor(x.length / 2)): number {
  requireFinite(x, "the start-up rule", 2);
  const n = x.length;
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  let mean = 0;
  let squares = 0;
  for (let d = n - 1; d >= 0; d--) {
    // Welford's update, growing backwards from the end.
    const count = n - d;
    const delta = x[d]! - mean;
    mean += delta / count;
    squares += delta * (x[d]! - mean);
    const score = squares / count ** 2;
    if (d <= cutMax && score <= least) {
      least = score;
      best = d;
    }
  }
  return best;
}
