import { AppError } from "../../orchestrator/contract/index.ts";
import { requireFinite } from "./finite-series.ts";
import { runningIntegral } from "./running-integral.ts";

/**
 * Means over whole periods that end with the series; what does not fill a period is left out at its beginning.
 *
 *   c_j = (1/P) ∫ x du over the j-th stretch of P samples, by the trapezoidal rule on straight lines between samples
 *
 * Limits: P need not be whole, but an error of P leaves a ripple of the oscillation's height times the error over P.
 *
 * @param x shape [n], n >= P + 1, finite
 * @param period P in samples, >= 2
 * @returns means, shape [⌊(n − 1)/P⌋], unit of x, oldest first; first, the place in samples where the oldest begins
 * @throws HISTORY_INVALID, NON_FINITE
 */
export function cycleMeans(x: Float64Array, period: number): { means: Float64Array; first: number } {
  requireFinite(x, "cycle means", 3);
  const end = x.length - 1;
  const cycles = Math.floor(end / period + 1e-9);
  if (!(period >= 2) || cycles < 1)
    throw new AppError(
      "HISTORY_INVALID",
      `a period of ${period} samples can't be averaged over in a series of ${x.length}`,
      {
        fix: "give a period of at least 2 samples that fits into the series",
      },
    );
  const integral = runningIntegral(x);
  const place = (j: number) => Math.max(0, end - (cycles - j) * period);
  const means = new Float64Array(cycles);
  for (let j = 0; j < cycles; j++) means[j] = (integral(place(j + 1)) - integral(place(j))) / period;
  return { means, first: place(0) };
}
