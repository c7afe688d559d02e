import { autoregression } from "./autoregression.ts";

/**
 * Long-run variance (n times the variance of the mean, for large n) as the spectral density at frequency zero of a
 * fitted autoregression.
 *
 *   lrv = v / (1 − Σ φ_j)²
 *
 * Limits: too small when the correlation time is not small against n: for a lag-1 correlation of 0.995 and n = 2000 it
 * reaches about half of the truth in the median. Zero for a series without variance.
 *
 * @param x shape [n], n >= 4, finite, no trend
 * @returns unit of x squared, >= 0, with the order chosen
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Heidelberger & Welch (1981), A spectral method for confidence interval generation; as spectrum0.ar of R's coda
 */
export function longRunVarianceAutoregressive(x: Float64Array): { longRunVariance: number; order: number } {
  const { order, coefficients, innovationVariance } = autoregression(x);
  const gap = 1 - coefficients.reduce((sum, phi) => sum + phi, 0);
  return { longRunVariance: innovationVariance === 0 ? 0 : innovationVariance / gap ** 2, order };
}
