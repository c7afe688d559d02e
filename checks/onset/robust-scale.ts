import { medianInPlace } from "./median-in-place.ts";

/** Median absolute deviation of a standard normal variable, Φ⁻¹(3/4). */
const NORMAL_MAD = 0.674489750196082;

/**
 * Standard deviation as seen by the median absolute deviation about the median.
 *
 *   scale = median|v − median v| / 0.67449
 *
 * Limits: the standard deviation for normal data only; 1.48 times it for a sine, 0.65 times for Student's t with 3
 * degrees of freedom, and 0 if more than half of the values are equal. Fewer than half may be arbitrarily wrong.
 *
 * @param values shape [>= n]; left alone
 * @param scratch shape [>= n]; overwritten
 * @returns unit of the values, >= 0; NaN if n = 0
 * @see Hampel (1974), The influence curve and its role in robust estimation
 */
export function robustScale(values: Float64Array, n: number, scratch: Float64Array): number {
  for (let i = 0; i < n; i++) scratch[i] = values[i]!;
  const centre = medianInPlace(scratch, n);
  for (let i = 0; i < n; i++) scratch[i] = Math.abs(values[i]! - centre);
  return medianInPlace(scratch, n) / NORMAL_MAD;
}
