import { mean as kahanMean, sampleVariance } from "simple-statistics";
import { requireFinite } from "./finite-series.ts";

// The library reads by index only, so that a typed array serves as well as the plain one that its types ask for.
const asNumbers = (x: Float64Array) => x as unknown as readonly number[];

/**
 * Arithmetic mean, by compensated summation.
 *
 *   mean = Σ x_i / n
 *
 * Limits: none worth naming; the error is a few rounding units of the mean of |x|, whatever n is.
 *
 * @param x shape [n], n >= 1, finite
 * @returns unit of x
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Neumaier (1974), Rundungsfehleranalyse einiger Verfahren zur Summation endlicher Summen (from memory)
 */
export function mean(x: Float64Array): number {
  requireFinite(x, "the mean", 1);
  return kahanMean(asNumbers(x));
}

/**
 * Sample variance about the mean, two passes.
 *
 *   variance = Σ (x_i − mean)² / (n − 1)
 *
 * Limits: describes the spread of the samples; says nothing of the mean's error when samples are correlated.
 *
 * @param x shape [n], n >= 2, finite
 * @returns unit of x squared, >= 0
 * @throws HISTORY_INVALID, NON_FINITE
 */
export function variance(x: Float64Array): number {
  requireFinite(x, "the variance", 2);
  return sampleVariance(asNumbers(x));
}
