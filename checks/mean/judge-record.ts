import type { ChannelJudgement, TestResult } from "../../orchestrator/contract/index.ts";
import { completeOptions, type FullJudgeOptions, type JudgeOptions } from "./judge-options.ts";
import { judgeStretch } from "./judge-stretch.ts";
import { lengthOfLookBefore } from "./look-schedule.ts";

/**
 * Judges the average of one channel of a record that is sound from its first to its last sample.
 *
 * Two looks, at the whole record and at its first 80 %, have to agree before anything is accepted: chance that favours
 * one look rarely favours both. Records without noise need one look only. The rule is the same for a finished record and for one that still grows; the latter is
 * judged at the lengths that `nextLookLength` names, each of which is 1.25 times the one before.
 *
 * Limits: relaxations much slower than the record are not seen by any look. See `judgeStretch`.
 *
 * @param x shape [n], n >= 0, oldest sample first, from the impulsive start unless `fromDeveloped`
 * @param given step, tolerance, confidence, periods
 * @returns verdict accepted, needs-longer, drifting or failed, with the interval of the whole record
 * @throws USAGE for options out of range
 */
export function judgeRecord(x: Float64Array, given: JudgeOptions): ChannelJudgement {
  const options = completeOptions(given);
  const whole = withDefaultsSaid(judgeStretch(x, options), options);
  if (whole.verdict !== "accepted") return whole;
  if (x.length < options.samplesMin) return tooShort(whole, x.length, options);
  // Without noise there is no luck that a second look could expose.
  if (whole.effectiveSamples === null) return whole;
  const before = judgeStretch(x.subarray(0, lengthOfLookBefore(x.length)), options);
  return before.verdict === "accepted"
    ? { ...whole, tests: [...whole.tests, twoLooks(true, before)] }
    : onceOnly(whole, before, x.length);
}

function tooShort(whole: ChannelJudgement, n: number, { samplesMin }: FullJudgeOptions): ChannelJudgement {
  return {
    ...whole,
    verdict: "needs-longer",
    samplesNeeded: [samplesMin, Math.max(samplesMin, Math.ceil(1.25 * n))],
    words: `needs longer: ${n} of the ${samplesMin} samples that were asked for; so far ${whole.words}`,
  };
}

function onceOnly(whole: ChannelJudgement, before: ChannelJudgement, n: number): ChannelJudgement {
  return {
    ...whole,
    verdict: "needs-longer",
    samplesNeeded: [Math.ceil(1.25 * n), Math.ceil(1.6 * n)],
    tests: [...whole.tests, twoLooks(false, before)],
    words: `needs longer: the whole record passes, its first 80 % do not (${before.words})`,
  };
}

function twoLooks(passed: boolean, before: ChannelJudgement): TestResult {
  return {
    name: "two-looks",
    statistic: passed ? 2 : 1,
    limit: 2,
    p: null,
    passed,
    words: passed
      ? "the record and its first 80 % both pass"
      : `the first 80 % of the record do not pass: ${before.words}`,
  };
}

/** Says what was assumed where nothing was asked for, and where a percentage has nothing to stand on. */
function withDefaultsSaid(judgement: ChannelJudgement, options: FullJudgeOptions): ChannelJudgement {
  if (judgement.mean === null || "absolute" in options.tolerance) return judgement;
  const { percent } = options.tolerance;
  const said = options.toleranceGiven
    ? ""
    : ` (no tolerance was asked for: ${percent} % of the mean is used)`;
  const nearZero = judgement.halfWidth !== null && judgement.halfWidth > Math.abs(judgement.mean);
  const advice = nearZero
    ? "; the mean is not told from zero, so that a percentage of it can't be met: give an absolute tolerance"
    : "";
  const words = `${judgement.words}${advice}${said}`;
  return {
    ...judgement,
    words,
    warnings: nearZero ? [...judgement.warnings, "mean-near-zero"] : judgement.warnings,
  };
}
