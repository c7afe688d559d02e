import {
  type ChannelJudgement,
  type Tolerance,
  VERDICTS,
  type Verdict,
} from "../../orchestrator/contract/index.ts";
import { type JudgeOptions, judgeRecord } from "../mean/index.ts";
import { combineHalfWidths } from "./combine-half-widths.ts";
import { asPercent, type Difference, differenceWords } from "./difference.ts";
import { type Estimate, estimateOf } from "./estimate.ts";
import { ratioInterval } from "./ratio-interval.ts";
import { type Forcing, type SharedForcing, sharedForcing } from "./shared-forcing.ts";

/** One channel of a run that is compared. */
export interface ComparedRun {
  /** Shape [n], the whole history, oldest first. */
  readonly samples: Float64Array;
  readonly judgement: ChannelJudgement;
  readonly forcing: Forcing;
  /** Samples before this index may be used (the guard of an onset); by default all. */
  readonly soundEnd?: number | null | undefined;
}

/** How a difference is judged. */
export interface CompareOptions {
  /** A percentage is one of the baseline's mean. By default the root sum of squares of the two loads' own tolerances. */
  readonly tolerance?: Tolerance | null | undefined;
  readonly fromDeveloped?: boolean | undefined;
  /** Fewest samples before a difference is accepted sample by sample. */
  readonly samplesMin?: number | undefined;
  /** Judge of one channel; by default the one that judged the loads. */
  readonly judge?: (samples: Float64Array, options: JudgeOptions) => ChannelJudgement;
}

/**
 * Difference of a load from its baseline, run less baseline, absolute and in percent of the baseline, with intervals.
 *
 * Histories that share their forcing are subtracted sample by sample over the stretch that is sound in both, and the
 * difference is judged as a channel of its own: what both have in common cancels, and no independence is assumed. Others
 * are combined as independent means. Where a shared stretch is too short for a judgement of its own although both loads
 * are accepted, their half-widths are added, which holds for any correlation.
 *
 * Limits: the difference has its own window; `differenceOfMeans` stands beside it. Independence of runs without shared
 * forcing is an assumption.
 *
 * @throws USAGE for loads judged at different confidences
 */
export function compareWithBaseline(
  run: ComparedRun,
  baseline: ComparedRun,
  options: CompareOptions = {},
): Difference {
  const shared = sharedForcing(run.forcing, baseline.forcing);
  if (!shared.shared) return apart(run, baseline, true, shared.words, options);
  const joint = sampleBySample(run, baseline, shared, options);
  if (joint.verdict !== "needs-longer" || worse(run, baseline) !== "accepted") return joint;
  const because =
    "the difference sample by sample needs longer records, so that nothing is known of the correlation";
  const sum = apart(run, baseline, false, because, options);
  return sum.verdict === "accepted" ? sum : joint;
}

function sampleBySample(
  run: ComparedRun,
  baseline: ComparedRun,
  shared: SharedForcing & { shared: true },
  options: CompareOptions,
): Difference {
  const n = Math.min(soundLength(run), soundLength(baseline));
  const difference = new Float64Array(n);
  for (let i = 0; i < n; i++) difference[i] = run.samples[i]! - baseline.samples[i]!;
  const { dtSeconds, startSeconds } = run.forcing;
  const judge = options.judge ?? judgeRecord;
  const tolerance = allowed(run, baseline, options);
  const judgement = judge(difference, {
    dt: dtSeconds,
    times: Float64Array.from(difference, (_, i) => startSeconds + i * dtSeconds),
    tolerance: tolerance === null ? null : { absolute: tolerance },
    confidence: run.judgement.confidence,
    periods: shared.periods.map((period) => period.steps),
    fromDeveloped: options.fromDeveloped,
    samplesMin: options.samplesMin,
  });
  const own = estimateOf(judgement);
  const base = estimateOf(baseline.judgement);
  return worded({
    way: "sample by sample",
    because: shared.words,
    verdict: judgement.verdict,
    mean: judgement.mean,
    halfWidth: judgement.halfWidth,
    confidence: judgement.confidence,
    // Difference and baseline are correlated in a way that was not measured.
    percent: own && base && asPercent(ratioInterval(own, base, false)),
    judgement,
    differenceOfMeans: differenceOfMeans(run, baseline),
  });
}

/** Two means, each with its own window. */
function apart(
  run: ComparedRun,
  baseline: ComparedRun,
  independent: boolean,
  why: string,
  options: CompareOptions,
): Difference {
  const a = estimateOf(run.judgement);
  const b = estimateOf(baseline.judgement);
  const combined = a && b && combineHalfWidths(a, b, independent);
  const halfWidth = combined?.halfWidth ?? null;
  const asked = options.tolerance == null ? null : allowed(run, baseline, options);
  const verdict = worse(run, baseline);
  const tooWide = asked !== null && halfWidth !== null && halfWidth > asked;
  return worded({
    way: independent ? "independent" : "worst case",
    because: combined?.rule === "sum" && independent ? `${why}; ${combined.because}` : why,
    verdict: verdict === "accepted" && tooWide ? "needs-longer" : verdict,
    mean: differenceOfMeans(run, baseline),
    halfWidth,
    confidence: run.judgement.confidence,
    percent: a && b && combined && shareOf(a, b, combined.rule === "root sum of squares"),
    judgement: null,
    differenceOfMeans: differenceOfMeans(run, baseline),
  });
}

/** (a − b)/b in percent. */
function shareOf(a: Estimate, b: Estimate, independent: boolean): Difference["percent"] {
  const interval = ratioInterval(a, b, independent);
  return asPercent(interval && { ratio: interval.ratio - 1, low: interval.low - 1, high: interval.high - 1 });
}

function allowed(run: ComparedRun, baseline: ComparedRun, { tolerance }: CompareOptions): number | null {
  const base = Math.abs(baseline.judgement.mean ?? 0);
  const size =
    tolerance == null
      ? Math.hypot(run.judgement.tolerance ?? 0, baseline.judgement.tolerance ?? 0)
      : "absolute" in tolerance
        ? tolerance.absolute
        : (base * tolerance.percent) / 100;
  // Nothing to go by (a baseline of zero, loads without tolerance): the judge's own default, which it states.
  return size > 0 ? size : null;
}

function worse(run: ComparedRun, baseline: ComparedRun): Verdict {
  const rank = (verdict: Verdict) => VERDICTS.indexOf(verdict);
  const a = run.judgement.verdict;
  const b = baseline.judgement.verdict;
  return rank(a) >= rank(b) ? a : b;
}

function soundLength({ samples, soundEnd }: ComparedRun): number {
  return Math.min(samples.length, soundEnd ?? samples.length);
}

function differenceOfMeans(run: ComparedRun, baseline: ComparedRun): number | null {
  const a = run.judgement.mean;
  const b = baseline.judgement.mean;
  return a === null || b === null ? null : a - b;
}

function worded(found: Omit<Difference, "words">): Difference {
  return { ...found, words: differenceWords(found) };
}
