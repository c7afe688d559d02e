import {
  autocorrelation,
  batchMeans,
  longRunVarianceAutoregressive,
  mean,
  studentTQuantile,
  variance,
  vonNeumannRatio,
} from "../estimators/index.ts";

const BATCH_COUNTS = [32, 22, 15, 10] as const;
/** One-sided 20 % point of the normal distribution. */
const INDEPENDENCE_Z = -0.8416;

/** The mean of a stretch with its standard error. */
export interface MeanInterval {
  /** Means of the batches. */
  readonly batches: Float64Array;
  /** Blocks that went in. */
  readonly blocks: number;
  readonly mean: number;
  /** Standard error of the mean, unit of the blocks. */
  readonly se: number;
  readonly df: number;
  readonly halfWidth: number;
  /** se² over what independent batches would give, >= 1: widens every other error taken from the batches. */
  readonly inflation: number;
}

/**
 * Interval of the mean of a correlated, stationary stretch.
 *
 *   batch means, B the largest of 32, 22, 15, 10 that von Neumann's ratio does not call correlated (one-sided, 20 %);
 *   se² = max( s_B²/B · (1 + r)/(1 − r), lrv/m ), r = clip(r_1 + 1/B, 0, 0.9), lrv of a fitted autoregression;
 *   half-width = t_{B−1} · se
 *
 * Limits: about 95 % from 50 effective samples on; too narrow below some 20, which the judgement therefore refuses.
 * A stretch without variance gets se 0.
 *
 * @param blocks shape [m], m >= 8, finite
 * @param confidence in (0.5, 1)
 * @returns unit of the blocks
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Tafazzoli, Steiger & Wilson (2011), N-Skart; Heidelberger & Welch (1981)
 */
export function meanInterval(blocks: Float64Array, confidence: number): MeanInterval {
  const batches = independentBatches(blocks);
  const count = batches.length;
  const naive = variance(batches) / count;
  const r1 = autocorrelation(batches, 1)[1]!;
  const r = Math.min(0.9, Math.max(0, r1 + 1 / count));
  const { longRunVariance } = longRunVarianceAutoregressive(blocks);
  const square = Math.max((naive * (1 + r)) / (1 - r), longRunVariance / blocks.length);
  const se = Math.sqrt(square);
  return {
    batches,
    blocks: blocks.length,
    mean: mean(blocks.subarray(blocks.length % count)),
    se,
    df: count - 1,
    halfWidth: studentTQuantile((1 + confidence) / 2, count - 1) * se,
    inflation: naive > 0 ? Math.max(1, square / naive) : 1,
  };
}

function independentBatches(blocks: Float64Array): Float64Array {
  for (const count of BATCH_COUNTS) {
    if (count > blocks.length) continue;
    const batches = batchMeans(blocks, count);
    if (vonNeumannRatio(batches).z >= INDEPENDENCE_Z) return batches;
  }
  return batchMeans(blocks, Math.min(blocks.length, BATCH_COUNTS[BATCH_COUNTS.length - 1]!));
}
