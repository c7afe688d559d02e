import type { ChannelJudgement, TestResult } from "../../orchestrator/contract/index.ts";
import { firstNonFinite } from "../estimators/index.ts";
import { numberInWords } from "./amount-in-words.ts";
import { judgeNoisy } from "./judge-noisy.ts";
import { absoluteTolerance, type FullJudgeOptions } from "./judge-options.ts";
import { emptyJudgement, windowFrom } from "./judgement-parts.ts";
import { SAMPLES_MIN } from "./look-schedule.ts";
import { CYCLES_MIN, type ReducedSeries, reduceSeries } from "./reduce-series.ts";
import { samplesNeeded } from "./samples-needed.ts";
import { type Settled, settled } from "./settled.ts";

/** Rounding of the channel itself: nothing finer is asked of a half-width. */
const ROUNDING = 1e-12;

/**
 * One look at the average of one stretch: start-up, stationarity, mean and half-width.
 *
 * A NaN or an infinity fails; fewer than 200 samples need longer; a constant has half-width 0; a noise-free record is
 * bounded; everything else is left to statistics.
 *
 * @param x shape [n], n >= 0
 * @param options complete
 * @returns the judgement; verdict accepted, needs-longer, drifting or failed
 */
export function judgeStretch(x: Float64Array, options: FullJudgeOptions): ChannelJudgement {
  const bad = firstNonFinite(x);
  if (bad !== null) return failed(x[bad]!, bad, options);
  if (x.length < SAMPLES_MIN) return tooFew(x.length, options);
  const { low, high } = extent(x);
  const size = Math.max(Math.abs(low), Math.abs(high));
  if (high - low <= ROUNDING * size) return constant(x, options);
  const reduced = reduceSeries(x, options.periods);
  if ("tooShortFor" in reduced) return tooFewCycles(x.length, reduced.tooShortFor, options);
  const tolerance = absoluteTolerance(options.tolerance, roughMean(reduced));
  const epsilon = Math.max(tolerance / 20, ROUNDING * size);
  const atRest = settled(reduced.blocks, epsilon, high - low, reduced.blockLength);
  if (atRest !== null) return resting(x, reduced, atRest, options);
  return judgeNoisy(x, reduced, options);
}

function failed(value: number, at: number, options: FullJudgeOptions): ChannelJudgement {
  const words = `sample ${at} is ${value}: the record can only be used up to there`;
  return { ...emptyJudgement(options), verdict: "failed", words };
}

function tooFew(n: number, options: FullJudgeOptions): ChannelJudgement {
  const needed: [number, number] = [SAMPLES_MIN, 4 * SAMPLES_MIN];
  const words = `${n} samples are too few to judge; ${SAMPLES_MIN} are the least`;
  return { ...emptyJudgement(options), verdict: "needs-longer", samplesNeeded: needed, words };
}

function tooFewCycles(n: number, period: number, options: FullJudgeOptions): ChannelJudgement {
  const least = Math.ceil(period * CYCLES_MIN) + 1;
  return {
    ...emptyJudgement(options),
    verdict: "needs-longer",
    samplesNeeded: [Math.max(least, Math.ceil(1.25 * n)), 2 * Math.max(least, n)],
    words: `the record holds ${numberInWords(n / period)} periods of ${numberInWords(period)} samples; ${CYCLES_MIN} are the least after the start-up`,
  };
}

function constant(x: Float64Array, options: FullJudgeOptions): ChannelJudgement {
  const value = x[x.length - 1]!;
  return {
    ...emptyJudgement(options),
    verdict: "accepted",
    mean: value,
    plainMean: value,
    halfWidth: 0,
    tolerance: absoluteTolerance(options.tolerance, value),
    window: windowFrom(0, x.length, options),
    warnings: ["constant"],
    hiddenDrift: 0,
    words: `the channel is constant at ${numberInWords(value)}`,
  };
}

function resting(
  x: Float64Array,
  reduced: ReducedSeries,
  atRest: Settled,
  options: FullJudgeOptions,
): ChannelJudgement {
  const n = x.length;
  const fromIndex = Math.ceil(reduced.first + atRest.from * reduced.blockLength);
  const tolerance = absoluteTolerance(options.tolerance, atRest.mean);
  const blocks = reduced.blocks.length - atRest.from;
  const size = Math.max(Math.abs(x[n - 1]!), Math.abs(atRest.mean));
  const test: TestResult = {
    name: "settled",
    statistic: atRest.halfWidth,
    limit: Math.max(tolerance, ROUNDING * size),
    p: null,
    passed: atRest.halfWidth <= Math.max(tolerance, ROUNDING * size),
    words: `the mean has come to rest within ±${numberInWords(atRest.halfWidth)}, with what it would still move if it went on as it does`,
  };
  const passed = test.passed && atRest.longEnough;
  return {
    ...emptyJudgement(options),
    verdict: passed ? "accepted" : "needs-longer",
    mean: atRest.mean,
    plainMean: atRest.mean,
    halfWidth: atRest.halfWidth,
    tolerance,
    window: windowFrom(fromIndex, n, options),
    period: reduced.period && { ...reduced.period, cycles: blocks },
    samplesNeeded: passed ? null : samplesNeeded(n, fromIndex, Math.max(1, (3 * fromIndex) / n) ** 0.5),
    hiddenDrift: 2 * atRest.halfWidth,
    tests: [test],
    words: passed
      ? `accepted: at rest from sample ${fromIndex} on, ${numberInWords(atRest.mean)} ± ${numberInWords(atRest.halfWidth)}; a bound, no statistics, since there is hardly any noise`
      : restingTooShort(test, fromIndex, n),
  };
}

function restingTooShort(test: TestResult, from: number, n: number): string {
  if (!test.passed) return `needs longer: ${test.words}, and ${numberInWords(test.limit)} is allowed`;
  return `needs longer: at rest only from sample ${from} of ${n} on; the rest has to last twice as long as what precedes it, and 8 periods`;
}

function roughMean({ blocks }: ReducedSeries): number {
  const half = blocks.subarray(Math.floor(blocks.length / 2));
  return half.reduce((sum, value) => sum + value, 0) / half.length;
}

function extent(x: Float64Array): { low: number; high: number } {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < x.length; i++) {
    const value = x[i]!;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return { low, high };
}
