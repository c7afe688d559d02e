import { longRunVarianceAutoregressive } from "./long-run-variance-autoregressive.ts";
import { variance } from "./mean.ts";

/**
 * Number of independent samples that would give the mean the same error.
 *
 *   n_eff = n · variance / lrv, lrv from a fitted autoregression
 *
 * Limits: too large where the long-run variance is too small, that is for few samples a correlation time; exceeds n for
 * negatively correlated or periodic series. A series without variance counts as n.
 *
 * @param x shape [n], n >= 4, finite, no trend
 * @returns > 0, a count but not whole
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Heidelberger & Welch (1981); as effectiveSize of R's coda
 */
export function effectiveSampleSize(x: Float64Array): number {
  const { longRunVariance } = longRunVarianceAutoregressive(x);
  return longRunVariance > 0 ? (x.length * variance(x)) / longRunVariance : x.length;
}
