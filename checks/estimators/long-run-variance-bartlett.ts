import { autocovariance } from "./autocovariance.ts";

/**
 * Long-run variance by the Bartlett kernel.
 *
 *   lrv = γ_0 + 2 Σ_{k=1}^{L} (1 − k/(L+1)) γ_k
 *
 * Limits: too small for positively correlated series unless L is several correlation times, and noisier with every lag.
 *
 * @param x shape [n], n >= 1, finite, no trend
 * @param lags L, a count; cut to n − 1
 * @returns unit of x squared, >= 0
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Newey & West (1987), A simple, positive semi-definite covariance matrix, equation 5 (from memory)
 */
export function longRunVarianceBartlett(x: Float64Array, lags: number): number {
  const gamma = autocovariance(x, lags);
  let sum = gamma[0]!;
  for (let k = 1; k < gamma.length; k++) sum += 2 * (1 - k / (lags + 1)) * gamma[k]!;
  return Math.max(0, sum);
}

/**
 * Bandwidth for the Bartlett kernel from the lag-1 autocorrelation, as if the series were a first-order autoregression.
 *
 *   L = ⌊1.1447 (4 ρ² n / (1 − ρ²)²)^{1/3}⌋, cut to n − 1, ρ clipped to [−0.97, 0.97]
 *
 * Limits: too short for oscillating correlation. The clip (common practice, no source) keeps the bandwidth below n for
 * near unit roots, where the kernel would otherwise eat the whole record and no test could reject.
 *
 * @param rho1 lag-1 autocorrelation, in [−1, 1]
 * @param n samples
 * @returns lags, a count in [0, n − 1]
 * @see Andrews (1991), Heteroskedasticity and autocorrelation consistent covariance matrix estimation, section 6 (from memory)
 */
export function andrewsBandwidth(rho1: number, n: number): number {
  const rho = Math.max(-0.97, Math.min(0.97, rho1));
  const alpha = (4 * rho * rho) / (1 - rho * rho) ** 2;
  return Math.min(n - 1, Math.floor(1.1447 * (alpha * n) ** (1 / 3)));
}
