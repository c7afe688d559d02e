import type { ChannelJudgement } from "../../orchestrator/contract/index.ts";
import type { FullJudgeOptions } from "./judge-options.ts";

/** A judgement that holds nothing yet but what was asked for. */
export function emptyJudgement(options: FullJudgeOptions): Omit<ChannelJudgement, "verdict" | "words"> {
  return {
    mean: null,
    plainMean: null,
    halfWidth: null,
    confidence: options.confidence,
    tolerance: options.toleranceGiven && "absolute" in options.tolerance ? options.tolerance.absolute : null,
    window: null,
    effectiveSamples: null,
    period: null,
    warnings: [],
    samplesNeeded: null,
    hiddenDrift: null,
    tests: [],
  };
}

/** The window from a sample to the end of a record of n samples, with its times. */
export function windowFrom(fromIndex: number, n: number, options: FullJudgeOptions) {
  const time = (i: number) => options.times?.[i] ?? i * options.dt;
  return { fromIndex, toIndex: n, fromTime: time(fromIndex), toTime: time(n - 1) };
}
