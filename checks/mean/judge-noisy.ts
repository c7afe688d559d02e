import type { ChannelJudgement, TestResult, Verdict } from "../../orchestrator/contract/index.ts";
import { KPSS_LEVEL_1_PERCENT, variance } from "../estimators/index.ts";
import { amountInWords, numberInWords } from "./amount-in-words.ts";
import { absoluteTolerance, type FullJudgeOptions } from "./judge-options.ts";
import { emptyJudgement, windowFrom } from "./judgement-parts.ts";
import { type MeanInterval, meanInterval } from "./mean-interval.ts";
import { movementSlows } from "./movement.ts";
import { CYCLES_MIN, type ReducedSeries } from "./reduce-series.ts";
import { samplesNeeded } from "./samples-needed.ts";
import { startUpEnd } from "./start-up.ts";
import {
  boundTest,
  levelTest,
  provenHarmless,
  type Rise,
  riseOver,
  trendTest,
  varianceTest,
} from "./stationarity.ts";

const EFFECTIVE_SAMPLES_MIN = 40;
/** A movement is called drift, rather than too little data, only when it is this unlikely to be chance. */
const DRIFT_P_MAX = 0.01;

/** What was measured over the window of a noisy record. */
interface Measured {
  readonly x: Float64Array;
  readonly reduced: ReducedSeries;
  readonly fromIndex: number;
  readonly kept: Float64Array;
  readonly interval: MeanInterval;
  readonly value: number;
  readonly halfWidth: number;
  readonly tolerance: number;
  readonly effective: number;
  readonly rise: Rise;
}

/**
 * One look at a record with noise: cut the start-up, batch, test.
 *
 * Limits: a relaxation much slower than the record passes every test there is (see `hiddenDrift`); coverage is measured,
 * not proven.
 *
 * @param x shape [n], n >= 200, finite
 * @param reduced the same record without its oscillation, at least 8 blocks
 * @param options complete
 */
export function judgeNoisy(
  x: Float64Array,
  reduced: ReducedSeries,
  options: FullJudgeOptions,
): ChannelJudgement {
  const measured = measure(x, reduced, options);
  const enough = enoughTests(measured, reduced);
  const still = stillnessTests(measured);
  const spread = varianceTest(x.subarray(measured.fromIndex));
  const tests = [...enough, ...still, ...(spread === null ? [] : [spread])];
  const verdict = verdictOf(measured, enough, still);
  const failing = [...enough, ...still].filter((test) => !test.passed);
  const more = verdict === "needs-longer" ? needed(measured, failing) : null;
  return {
    ...emptyJudgement(options),
    verdict,
    mean: measured.value,
    plainMean: measured.interval.mean,
    halfWidth: measured.halfWidth,
    tolerance: measured.tolerance,
    window: windowFrom(measured.fromIndex, x.length, options),
    effectiveSamples: measured.effective,
    period: reduced.period && { ...reduced.period, cycles: measured.kept.length },
    warnings: spread?.passed === false ? ["variance-changed"] : [],
    samplesNeeded: more,
    hiddenDrift: measured.rise.hidden,
    tests,
    words: inWords(verdict, measured, failing, more),
  };
}

function measure(x: Float64Array, reduced: ReducedSeries, options: FullJudgeOptions): Measured {
  const { blocks, blockLength, first } = reduced;
  const start = Math.min(startUpEnd(blocks), blocks.length - CYCLES_MIN);
  const kept = blocks.subarray(start);
  const fromIndex = Math.ceil(first + start * blockLength);
  const rise = riseOver(kept);
  const inverse = options.fromDeveloped ? null : inverseTimes(reduced);
  const interval = meanInterval(blocks, start, inverse, options.confidence, rise.noise);
  const spread = reduced.period === null ? variance(x.subarray(fromIndex)) : variance(kept);
  const count = reduced.period === null ? x.length - fromIndex : kept.length;
  return {
    x,
    reduced,
    fromIndex,
    kept,
    interval,
    value: interval.value,
    halfWidth: interval.halfWidth,
    tolerance: absoluteTolerance(options.tolerance, interval.value),
    effective: interval.se > 0 ? Math.min(count, spread / interval.se ** 2) : count,
    rise,
  };
}

/** Average of 1/t over each block, t in samples from the impulsive start, the first sample at t = 1. */
function inverseTimes({ blocks, blockLength, first }: ReducedSeries): Float64Array {
  return Float64Array.from(
    blocks,
    (_, j) => Math.log1p(blockLength / (first + j * blockLength + 1)) / blockLength,
  );
}

function enoughTests(m: Measured, reduced: ReducedSeries): TestResult[] {
  const n = m.x.length;
  const least = reduced.period === null ? EFFECTIVE_SAMPLES_MIN : CYCLES_MIN;
  const noun = reduced.period === null ? "independent samples" : "independent cycles";
  return [
    {
      name: "start-up-over",
      statistic: m.fromIndex,
      limit: Math.floor(n / 3),
      p: null,
      passed: m.fromIndex <= n / 3,
      words:
        m.fromIndex <= n / 3
          ? `the start-up is over by sample ${m.fromIndex} of ${n}`
          : `the start-up lasts until sample ${m.fromIndex} of ${n}; at most a third of the record may be start-up`,
    },
    {
      name: "effective-samples",
      statistic: m.effective,
      limit: least,
      p: null,
      passed: m.effective >= least,
      words: `the window is worth ${numberInWords(m.effective)} ${noun}; ${least} are the least`,
    },
    {
      name: "half-width",
      statistic: m.halfWidth,
      limit: m.tolerance,
      p: null,
      passed: m.halfWidth <= m.tolerance,
      words: `the mean is known to ±${amountInWords(m.halfWidth, m.value)}; ±${amountInWords(m.tolerance, m.value)} is allowed`,
    },
  ];
}

function stillnessTests(m: Measured): TestResult[] {
  const bound = boundTest(m.rise, m.tolerance, m.value);
  if (provenHarmless(m.rise, m.halfWidth, m.tolerance)) return [bound];
  return [bound, trendTest(m.rise, m.interval.trendT, m.value), levelTest(m.kept)];
}

function verdictOf(m: Measured, enough: readonly TestResult[], still: readonly TestResult[]): Verdict {
  if (enough.every((test) => test.passed) && still.every((test) => test.passed)) return "accepted";
  const trend = m.rise.p < DRIFT_P_MAX && Math.abs(m.rise.rise) > m.tolerance;
  const wandering = still.some((test) => test.name === "level" && test.statistic > KPSS_LEVEL_1_PERCENT);
  return (trend || wandering) && !movementSlows(m.reduced.blocks) ? "drifting" : "needs-longer";
}

function needed(m: Measured, failing: readonly TestResult[]): readonly [number, number] {
  const n = m.x.length;
  const width = m.halfWidth / m.tolerance;
  const shortage = failing.some((test) => test.name === "effective-samples")
    ? Math.sqrt((m.reduced.period === null ? EFFECTIVE_SAMPLES_MIN : CYCLES_MIN) / m.effective)
    : 0;
  return samplesNeeded(n, m.fromIndex, Math.max(width, shortage));
}

function inWords(
  verdict: Verdict,
  m: Measured,
  failing: readonly TestResult[],
  more: readonly [number, number] | null,
): string {
  const value = `${numberInWords(m.value)} ± ${numberInWords(m.halfWidth)}`;
  if (verdict === "accepted") return `accepted: ${value} over samples ${m.fromIndex} to ${m.x.length}`;
  // The first two reasons say what to do; the rest stands in the tests.
  const reasons = (verdict === "drifting" ? [...failing].reverse() : failing)
    .slice(0, 2)
    .map((test) => test.words)
    .join("; ");
  return more === null
    ? `drifting: ${reasons}; go on only if the movement has to end, and look for what drives it`
    : `needs longer: ${reasons}; ${more[0]} to ${more[1]} samples in all would probably do`;
}
