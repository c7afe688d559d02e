import { type Autoregression, autoregression } from "../estimators/index.ts";

/**
 * Autoregression of a stretch, its order also held below a quarter of the samples, so that short stretches are not
 * explained away.
 *
 * @param kept shape [m], m >= 8, finite
 * @throws HISTORY_INVALID, NON_FINITE
 */
export function noiseOf(kept: Float64Array): Autoregression {
  const m = kept.length;
  return autoregression(kept, Math.min(Math.floor(10 * Math.log10(m)), Math.floor(m / 4)));
}

/** Long-run variance of an autoregression: its spectral density at frequency zero, unit of the samples squared. */
export function longRunVarianceOf({ coefficients, innovationVariance }: Autoregression): number {
  if (innovationVariance === 0) return 0;
  return innovationVariance / (1 - coefficients.reduce((sum, phi) => sum + phi, 0)) ** 2;
}

/**
 * The same of what a straight line through a stretch leaves, so that a movement does not hide behind the noise it makes.
 *
 * @param kept shape [m], m >= 8, finite
 * @param perBlock slope of the line
 */
export function noiseBesideTrend(kept: Float64Array, perBlock: number): Autoregression {
  return noiseOf(kept.map((value, i) => value - perBlock * i));
}
