import type { TestResult } from "../../orchestrator/contract/index.ts";
import {
  type Autoregression,
  andrewsBandwidth,
  autocorrelation,
  batchMeans,
  KPSS_LEVEL_5_PERCENT,
  kpss,
  linearRegression,
  studentTCdf,
  studentTQuantile,
  variance,
  welchTest,
} from "../estimators/index.ts";
import { amountInWords, numberInWords } from "./amount-in-words.ts";
import { longRunVarianceOf, noiseBesideTrend } from "./noise.ts";

const P_MIN = 0.05;
const VARIANCE_P_MIN = 0.01;
/** Rises of up to this many tolerances, half of them at either end of the window, pass the bound. */
const BOUND_TOLERANCES = 3;
const HARMLESS_TOLERANCES = 1.5;

/** Movement of the mean over a window, as a straight line. */
export interface Rise {
  /** Last end less first end of the line, unit of the channel. */
  readonly rise: number;
  readonly se: number;
  readonly df: number;
  readonly p: number;
  /** Noise beside the line. */
  readonly noise: Autoregression;
  /** Largest movement that the data still allow, at 95 % one-sided. */
  readonly hidden: number;
}

const LINE_MEANS = 32;

/**
 * Straight-line movement of the mean over a window.
 *
 *   least squares on 32 batch means; standard error √12 times that of the mean, from an autoregression fitted to what the
 *   line leaves, so that the movement does not hide behind the noise that it makes
 *
 * Limits: a movement that comes back within the window is seen by the level statistic, not here.
 *
 * @param kept shape [m], the window's blocks, m >= 8
 * @returns unit of the channel
 */
export function riseOver(kept: Float64Array): Rise {
  const means = batchMeans(kept, Math.min(LINE_MEANS, kept.length));
  const line = linearRegression(
    Float64Array.from(means, (_, j) => j),
    means,
  );
  const df = means.length - 2;
  const rise = line.slope * means.length;
  const noise = noiseBesideTrend(kept, rise / kept.length);
  const se = Math.sqrt((12 * longRunVarianceOf(noise)) / kept.length);
  const p = rise === 0 ? 1 : 2 * studentTCdf(-Math.abs(rise) / se, df);
  return { rise, se, df, p, noise, hidden: Math.abs(rise) + studentTQuantile(0.95, df) * se };
}

/** Whether the largest movement still possible is harmless at this tolerance, whatever the other tests say. */
export function provenHarmless(rise: Rise, halfWidth: number, tolerance: number): boolean {
  return rise.hidden <= HARMLESS_TOLERANCES * tolerance && halfWidth <= tolerance;
}

/** The movement that the data still allow, held against the tolerance (two one-sided tests, Schuirmann 1987). */
export function boundTest(rise: Rise, tolerance: number, mean: number): TestResult {
  const statistic = Math.abs(rise.rise) + studentTQuantile(0.9, rise.df) * rise.se;
  const limit = BOUND_TOLERANCES * tolerance;
  const way = rise.rise < 0 ? "fall" : "rise";
  return {
    name: "movement-bound",
    statistic,
    limit,
    p: null,
    passed: statistic <= limit,
    words: `the mean may still ${way} by up to ${amountInWords(statistic, mean)} over the window; ${amountInWords(limit, mean)} is allowed`,
  };
}

/**
 * Whether a straight trend stands out of the noise: over the window, or over nearly the whole record where a trend fits
 * that better than any start-up does, so that a drift is not cut away as if it were one.
 */
export function trendTest(rise: Rise, insteadOfStartUp: number | null, mean: number): TestResult {
  const statistic = Math.max(Math.abs(rise.rise / rise.se) || 0, Math.abs(insteadOfStartUp ?? 0));
  const p = 2 * studentTCdf(-statistic, rise.df);
  const passed = p >= P_MIN;
  const way = rise.rise < 0 ? "falls" : "rises";
  return {
    name: "trend",
    statistic,
    limit: studentTQuantile(1 - P_MIN / 2, rise.df),
    p,
    passed,
    words: passed
      ? "no straight trend stands out of the noise"
      : `the mean ${way} by ${amountInWords(rise.rise, mean)} over the window, and its trend is more than chance explains (p = ${numberInWords(p)})`,
  };
}

/** Whether the mean wanders within the window (Kwiatkowski et al. 1992, bandwidth of Andrews 1991). */
export function levelTest(blocks: Float64Array): TestResult {
  const rho1 = autocorrelation(blocks, 1)[1]!;
  const statistic = kpss(blocks, andrewsBandwidth(rho1, blocks.length));
  const passed = statistic <= KPSS_LEVEL_5_PERCENT;
  return {
    name: "level",
    statistic,
    limit: KPSS_LEVEL_5_PERCENT,
    p: null,
    passed,
    words: passed
      ? "the mean keeps its level over the window"
      : `the mean does not keep one level over the window (statistic ${numberInWords(statistic)}, ${KPSS_LEVEL_5_PERCENT} is allowed)`,
  };
}

/**
 * Whether the spread about the local mean is the same in both halves of a window; a failure is a warning only.
 *
 *   Welch's t on the logarithms of the variances within 2 × 16 stretches
 *
 * Limits: needs 32 stretches of at least 4 samples; correlated samples make it speak up somewhat too often.
 *
 * @param x shape [n], the window's samples
 * @returns null where there are too few samples or a stretch does not vary
 */
export function varianceTest(x: Float64Array): TestResult | null {
  const size = Math.floor(x.length / 32);
  if (size < 4) return null;
  const logs = new Float64Array(32);
  for (let j = 0; j < 32; j++) logs[j] = Math.log(variance(x.subarray(j * size, (j + 1) * size)));
  if (!logs.every(Number.isFinite)) return null;
  const { t, df, p } = welchTest(logs.subarray(0, 16), logs.subarray(16));
  const factor = Math.exp(
    logs.subarray(16).reduce((s, v) => s + v, 0) / 16 - logs.subarray(0, 16).reduce((s, v) => s + v, 0) / 16,
  );
  const passed = p >= VARIANCE_P_MIN;
  return {
    name: "variance",
    statistic: Math.abs(t),
    limit: studentTQuantile(1 - VARIANCE_P_MIN / 2, df),
    p,
    passed,
    words: passed
      ? "the spread is the same in both halves of the window"
      : `the spread changes within the window: its standard deviation is multiplied by ${numberInWords(Math.sqrt(factor))} from the first half to the second`,
  };
}
