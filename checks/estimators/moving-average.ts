import { requireFinite } from "./finite-series.ts";
import { runningIntegral } from "./running-integral.ts";

/**
 * Centred moving average over a stretch that need not be a whole number of samples: takes one period out of a series.
 *
 *   y_i = (1/P) ∫_{i−P/2}^{i+P/2} x du
 *
 * Limits: dampens everything faster than about P, and shortens the series by P.
 *
 * @param x shape [n], n >= P + 2, finite
 * @param length P in samples, > 0
 * @returns values, shape [about n − P], unit of x; first, the index in x of the oldest
 * @throws HISTORY_INVALID, NON_FINITE
 */
export function movingAverage(x: Float64Array, length: number): { values: Float64Array; first: number } {
  requireFinite(x, "the moving average", Math.ceil(length) + 2);
  const integral = runningIntegral(x);
  const first = Math.ceil(length / 2);
  const values = new Float64Array(x.length - 2 * first);
  for (let i = 0; i < values.length; i++) {
    const at = first + i;
    values[i] = (integral(at + length / 2) - integral(at - length / 2)) / length;
  }
  return { values, first };
}
