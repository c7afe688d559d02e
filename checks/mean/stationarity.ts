import type { TestResult } from "../../orchestrator/contract/index.ts";
import {
  andrewsBandwidth,
  autocorrelation,
  KPSS_LEVEL_5_PERCENT,
  kpss,
  linearRegression,
  studentTCdf,
  studentTQuantile,
  variance,
  welchTest,
} from "../estimators/index.ts";
import { amountInWords, numberInWords } from "./amount-in-words.ts";
import type { MeanInterval } from "./mean-interval.ts";
import type { GuardedInterval } from "./tail-guard.ts";

const P_MIN = 0.05;
const VARIANCE_P_MIN = 0.01;
/** Rises of up to this many tolerances, half of them at either end of the window, pass the bound. */
const BOUND_TOLERANCES = 3;
const HARMLESS_TOLERANCES = 2;

/** Movement of the mean over a window, as a straight line through the batch means. */
export interface Rise {
  /** Last end less first end of the line, unit of the channel. */
  readonly rise: number;
  readonly se: number;
  readonly df: number;
  readonly p: number;
  /** Largest movement that the data still allow, at 95 % one-sided. */
  readonly hidden: number;
}

/**
 * Straight-line movement of the mean over a window.
 *
 *   batch means on batch number by least squares, errors widened by the interval's inflation
 *
 * Limits: a movement that comes back within the window is seen by the level statistic, not here.
 *
 * @param interval its batches, at least 3
 * @returns unit of the channel
 */
export function riseOver(interval: MeanInterval): Rise {
  const { batches } = interval;
  const count = batches.length;
  const line = linearRegression(
    Float64Array.from(batches, (_, j) => j),
    batches,
  );
  const df = count - 2;
  const rise = line.slope * count;
  const se = line.slopeSe * count * Math.sqrt(interval.inflation);
  const p = rise === 0 ? 1 : 2 * studentTCdf(-Math.abs(rise) / se, df);
  return { rise, se, df, p, hidden: Math.abs(rise) + studentTQuantile(0.95, df) * se };
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

/** Whether the straight-line movement stands out of the noise. */
export function trendTest(rise: Rise, mean: number): TestResult {
  const passed = rise.p >= P_MIN;
  const way = rise.rise < 0 ? "falls" : "rises";
  return {
    name: "trend",
    statistic: Math.abs(rise.rise) / rise.se || 0,
    limit: studentTQuantile(1 - P_MIN / 2, rise.df),
    p: rise.p,
    passed,
    words: passed
      ? "no straight trend stands out of the noise"
      : `the mean ${way} by ${amountInWords(rise.rise, mean)} over the window, more than chance explains (p = ${numberInWords(rise.p)})`,
  };
}

/** Whether a tail that decays like 1/t stands out of the noise. */
export function tailTest(guarded: GuardedInterval, batches: number): TestResult {
  const passed = guarded.p >= P_MIN;
  return {
    name: "start-up-tail",
    statistic: Math.abs(guarded.t),
    limit: studentTQuantile(1 - P_MIN / 2, batches - 2),
    p: guarded.p,
    passed,
    words: passed
      ? "no tail of the start-up stands out of the noise"
      : `the start-up has left a slowly decaying tail in the window (p = ${numberInWords(guarded.p)})`,
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
