import type { ChannelJudgement, Onset } from "../orchestrator/contract/index.ts";
import { type JudgeOptions, judgeRecord } from "./mean/index.ts";

/** Warning of an average that ends before an onset, since the run went wrong later. */
const BEFORE_ONSET = "before-onset";
/** Warning of an average whose channel scatters differently later: what a bounded breakdown is, seen from the average. */
const VARIANCE_CHANGED = "variance-changed";
/** Warning of an average in whose record the mean jumped. */
const MEAN_SHIFT = "mean-shift";

/**
 * Judges one channel of a record with what is known of an onset.
 *
 *   no onset: the whole record; a shift of the mean stops nothing, it becomes a warning;
 *   an onset: the stretch that is still trusted, accepted with the warning `before-onset`, else unstable;
 *   no stable baseline: unstable, no number
 *
 * @param x shape [n], n >= 0, the whole record
 * @param onset of the run, whichever channel showed it; null for a sound run
 * @param options as for `judgeRecord`
 * @returns the judgement; indices refer to x
 * @throws USAGE for options out of range
 */
export function judgeBesideOnset(
  x: Float64Array,
  onset: Onset | null,
  options: JudgeOptions,
): ChannelJudgement {
  if (onset === null) return judgeRecord(x, options);
  if (onset.kind === "mean-shift") return withWarning(judgeRecord(x, options), MEAN_SHIFT);
  if (onset.kind === "no-stable-baseline") return unstable(judgeRecord(x.subarray(0, 0), options), onset);
  const trusted = x.subarray(0, onset.trustedEndIndex ?? x.length);
  const plain = judgeRecord(trusted, options);
  const judged = onset.kind === "wake-breakdown" ? withWarning(plain, VARIANCE_CHANGED) : plain;
  if (judged.verdict !== "accepted") return unstable(judged, onset);
  return {
    ...withWarning(judged, BEFORE_ONSET),
    words: `${judged.words}; later samples are left out, because ${placeInWords(onset)}`,
  };
}

function unstable(judged: ChannelJudgement, onset: Onset): ChannelJudgement {
  const before = onset.index === null ? "" : `, and what precedes it will not do (${judged.words})`;
  return {
    ...judged,
    verdict: "unstable",
    samplesNeeded: null,
    words: `unstable: ${placeInWords(onset)}${before}`,
  };
}

function placeInWords(onset: Onset): string {
  if (onset.index === null) return "the run shows trouble before it had a stable stretch";
  return `${onset.kind.replace("-", " ")} of ${onset.channel} begins at sample ${onset.index}`;
}

function withWarning(judged: ChannelJudgement, warning: string): ChannelJudgement {
  if (judged.warnings.includes(warning)) return judged;
  return { ...judged, warnings: [...judged.warnings, warning] };
}
