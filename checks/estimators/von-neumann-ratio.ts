import { requireFinite } from "./finite-series.ts";
import { mean } from "./mean.ts";

/**
 * Ratio of von Neumann: squared successive differences over squared deviations, with its distance from independence.
 *
 *   ratio = Σ (x_{i+1} − x_i)² / Σ (x_i − x̄)², expected 2; z = (ratio − 2) / sqrt(4 (n − 2) / ((n − 1)(n + 1)))
 *
 * Limits: z is standard normal for independent normal x from about n = 10 on; negative z means positive correlation.
 * A series without variance gives ratio 2 and z 0, since nothing there speaks against independence.
 *
 * @param x shape [n], n >= 3, finite
 * @returns ratio in [0, 4], z dimensionless
 * @throws HISTORY_INVALID, NON_FINITE
 * @see von Neumann (1941), Distribution of the ratio of the mean square successive difference to the variance (from memory)
 */
export function vonNeumannRatio(x: Float64Array): { ratio: number; z: number } {
  requireFinite(x, "von Neumann's ratio", 3);
  const n = x.length;
  const about = mean(x);
  let steps = 0;
  let squares = 0;
  for (let i = 0; i < n; i++) {
    squares += (x[i]! - about) ** 2;
    if (i > 0) steps += (x[i]! - x[i - 1]!) ** 2;
  }
  if (squares === 0) return { ratio: 2, z: 0 };
  const ratio = steps / squares;
  return { ratio, z: (ratio - 2) / Math.sqrt((4 * (n - 2)) / ((n - 1) * (n + 1))) };
}
