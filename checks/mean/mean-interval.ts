import { type Autoregression, mean, studentTQuantile } from "../estimators/index.ts";
import { longRunVarianceOf, noiseOf } from "./noise.ts";
import { type LevelBesideStartUp, levelBesideStartUp, type StartUpShape } from "./start-up-fit.ts";

/** Degrees of freedom that the estimate of the long-run variance is taken to be worth at most. */
const DF_MAX = 20;
/**
 * Share of the allowed misses that is spent: records that stop as soon as they look good look better than they are, and
 * a wider interval buys protection against drift more cheaply than a second look does. Measured by simulation.
 */
const MISSES_SPENT = 0.6;

/** The mean of a stretch with its standard error and interval. */
export interface MeanInterval {
  /** Plain mean of the stretch. */
  readonly mean: number;
  /** Its standard error, unit of the blocks. */
  readonly se: number;
  /** Centre and half-width of the interval to hand out. */
  readonly value: number;
  readonly halfWidth: number;
  /** Start-up that was allowed for; null if none. */
  readonly startUp: StartUpShape | null;
  /** Straight trend over nearly the whole record, in its standard errors, if it fits better than any start-up. */
  readonly trendT: number | null;
}

/**
 * Interval of the mean of a correlated record with a start-up: the union of two intervals, one of the stretch left after
 * the cut, one of the level fitted jointly with the start-up to nearly the whole record.
 *
 *   se² = lrv/m, lrv of an autoregression fitted to the stretch; half-widths t_ν · se, ν = min(20, m/2 − 1),
 *   at a confidence of 1 − 0.6 (1 − confidence)
 *
 * Limits: coverage is measured by simulation, not proven, and falls below some 40 effective samples, which the judgement
 * therefore refuses. A stretch without variance gets half-width 0.
 *
 * @param blocks shape [m], the whole record
 * @param start first block of the stretch; m − start >= 8
 * @param inverseTimes shape [m], average of 1/t over each block; null for records from developed flow
 * @param confidence in (0.5, 1)
 * @param noise of the stretch beside its trend, for the fit
 * @returns unit of the blocks
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Heidelberger & Welch (1981), A spectral method for confidence interval generation
 */
export function meanInterval(
  blocks: Float64Array,
  start: number,
  inverseTimes: Float64Array | null,
  confidence: number,
  noise: Autoregression,
): MeanInterval {
  const kept = blocks.subarray(start);
  const m = kept.length;
  const plain = mean(kept);
  const se = Math.sqrt(longRunVarianceOf(noiseOf(kept)) / m);
  const misses = MISSES_SPENT * (1 - confidence);
  const t = studentTQuantile(1 - misses / 2, Math.min(DF_MAX, Math.floor(m / 2) - 1));
  const fit = inverseTimes && levelBesideStartUp(blocks, inverseTimes, noise);
  const { low, high } = union(plain, t * se, fit, t);
  return {
    mean: plain,
    se,
    value: (low + high) / 2,
    halfWidth: (high - low) / 2,
    startUp: fit?.shape ?? null,
    trendT: fit?.trendT ?? null,
  };
}

function union(plain: number, reach: number, fit: LevelBesideStartUp | null, t: number) {
  const low = plain - reach;
  const high = plain + reach;
  if (fit === null) return { low, high };
  return { low: Math.min(low, fit.level - t * fit.se), high: Math.max(high, fit.level + t * fit.se) };
}
