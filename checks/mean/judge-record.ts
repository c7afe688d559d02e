import type { ChannelJudgement } from "../../orchestrator/contract/index.ts";
import { completeOptions, type FullJudgeOptions, type JudgeOptions } from "./judge-options.ts";
import { judgeStretch } from "./judge-stretch.ts";

/**
 * Judges the average of one channel of a record that is sound from its first to its last sample.
 *
 * One rule for a finished record and for one that still grows; the latter is judged at the lengths that
 * `nextLookLength` names, and stops at the first that is accepted. The interval is a little wider than its confidence
 * asks for, which pays for looking more than once.
 *
 * Limits: relaxations much slower than the record are not seen by any look. What is published
 * of coverage and cost is measured by simulation.
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
  return whole;
}

function tooShort(whole: ChannelJudgement, n: number, { samplesMin }: FullJudgeOptions): ChannelJudgement {
  return {
    ...whole,
    verdict: "needs-longer",
    samplesNeeded: [samplesMin, Math.max(samplesMin, Math.ceil(1.25 * n))],
    words: `needs longer: ${n} of the ${samplesMin} samples that were asked for; so far ${whole.words}`,
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
