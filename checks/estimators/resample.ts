import { AppError } from "../../orchestrator/contract/index.ts";
import { requireFinite } from "./finite-series.ts";

/**
 * Values at evenly spaced times, by straight lines between the samples.
 *
 *   y_j = x at t_0 + j·dt
 *
 * Limits: dampens what varies within a step; exact at samples that fall on the new grid.
 *
 * @param times shape [n], n >= 2, strictly rising
 * @param x shape [n], finite
 * @param dt new step in the unit of times, > 0
 * @returns shape [⌊(t_{n−1} − t_0)/dt⌋ + 1], unit of x
 * @throws HISTORY_INVALID, NON_FINITE
 */
export function resample(times: Float64Array, x: Float64Array, dt: number): Float64Array {
  requireFinite(x, "resampling", 2);
  const span = times[times.length - 1]! - times[0]!;
  if (!(dt > 0) || !(span > 0) || times.length !== x.length)
    throw new AppError(
      "HISTORY_INVALID",
      "resampling needs rising times, one a sample, and a step above zero",
    );
  const out = new Float64Array(Math.floor(span / dt + 1e-9) + 1);
  let i = 0;
  for (let j = 0; j < out.length; j++) {
    const t = times[0]! + j * dt;
    while (i < times.length - 2 && times[i + 1]! < t) i++;
    const f = Math.min(1, (t - times[i]!) / (times[i + 1]! - times[i]!));
    out[j] = x[i]! + f * (x[i + 1]! - x[i]!);
  }
  return out;
}
