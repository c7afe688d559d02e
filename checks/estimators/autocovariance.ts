import { requireFinite } from "./finite-series.ts";
import { mean } from "./mean.ts";

/**
 * Autocovariances of lags 0 to lagMax, biased (divided by n), so that the sequence is positive definite.
 *
 *   γ_k = (1/n) Σ_{i=0}^{n−1−k} (x_i − x̄)(x_{i+k} − x̄)
 *
 * Limits: biased towards zero by about (k + τ)/n, τ the correlation time in samples; lags near n mean nothing.
 *
 * @param x shape [n], n >= 1, finite
 * @param lagMax largest lag, a count of samples; cut to n − 1
 * @returns shape [min(lagMax, n − 1) + 1], unit of x squared
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Priestley (1981), Spectral Analysis and Time Series, section 5.3.3 (from memory)
 */
export function autocovariance(x: Float64Array, lagMax: number): Float64Array {
  requireFinite(x, "the autocovariance", 1);
  const n = x.length;
  const about = mean(x);
  const c = x.map((value) => value - about);
  const out = new Float64Array(Math.min(lagMax, n - 1) + 1);
  for (let k = 0; k < out.length; k++) {
    let sum = 0;
    for (let i = k; i < n; i++) sum += c[i]! * c[i - k]!;
    out[k] = sum / n;
  }
  return out;
}

/**
 * Autocorrelations of lags 0 to lagMax.
 *
 *   ρ_k = γ_k / γ_0
 *
 * Limits: those of the autocovariance; all but lag 0 are 0 for a series without variance, where nothing is defined.
 *
 * @param x shape [n], n >= 1, finite
 * @param lagMax largest lag, a count of samples; cut to n − 1
 * @returns shape [min(lagMax, n − 1) + 1], in [−1, 1], first entry 1
 * @throws HISTORY_INVALID, NON_FINITE
 */
export function autocorrelation(x: Float64Array, lagMax: number): Float64Array {
  const gamma = autocovariance(x, lagMax);
  const scale = gamma[0]!;
  return gamma.map((value, k) => (k === 0 ? 1 : scale > 0 ? value / scale : 0));
}
