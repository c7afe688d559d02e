import type { ChannelJudgement } from "../../orchestrator/contract/index.ts";

/** A mean with its half-width. */
export interface Estimate {
  readonly mean: number;
  readonly halfWidth: number;
  readonly confidence: number;
  /** The half-width bounds a record that has come to rest; it is no statistic and does not average out. */
  readonly isBound: boolean;
}

/** The estimate that a judgement holds, accepted or not; null where it holds none. */
export function estimateOf(judgement: ChannelJudgement): Estimate | null {
  const { mean, halfWidth, confidence, effectiveSamples } = judgement;
  if (mean === null || halfWidth === null) return null;
  // A record at rest has no effective samples: nothing was estimated from scatter.
  return { mean, halfWidth, confidence, isBound: effectiveSamples === null && halfWidth > 0 };
}
