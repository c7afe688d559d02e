import { longRunVarianceBartlett } from "./long-run-variance-bartlett.ts";
import { mean } from "./mean.ts";

/** Critical value of the level statistic at 5 % (Kwiatkowski et al. 1992, table 1). */
export const KPSS_LEVEL_5_PERCENT = 0.463;
/** The same at 1 %. */
export const KPSS_LEVEL_1_PERCENT = 0.739;

/**
 * Level statistic of Kwiatkowski, Phillips, Schmidt and Shin: large if the mean wanders.
 *
 *   η = Σ S_t² / (n² lrv), S_t = Σ_{i<=t} (x_i − x̄), lrv by the Bartlett kernel
 *
 * Limits: rejects too often if the lags do not span the correlation, hardly ever if they span a good part of the
 * series. Zero for a series without variance.
 *
 * @param x shape [n], n >= 2, finite
 * @param lags of the Bartlett kernel, a count
 * @returns dimensionless, >= 0
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Kwiatkowski, Phillips, Schmidt & Shin (1992), equation 13 (from memory); as kpss.test of R's tseries
 */
export function kpss(x: Float64Array, lags: number): number {
  const longRunVariance = longRunVarianceBartlett(x, lags);
  if (longRunVariance === 0) return 0;
  const about = mean(x);
  let partial = 0;
  let sum = 0;
  for (const value of x) {
    partial += value - about;
    sum += partial * partial;
  }
  return sum / (x.length ** 2 * longRunVariance);
}
