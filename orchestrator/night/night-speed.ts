import type { HistoryJudgement } from "../contract/index.ts";

/** How far one run is, and how fast. */
export interface RunPace {
  readonly done: boolean;
  /** Steps of the current attempt, those of a leg that is being computed included. */
  readonly steps: number;
  readonly longestSteps: number;
  /** Steps and seconds measured on the current attempt in this night. */
  readonly measured: { readonly steps: number; readonly seconds: number };
  /** Seconds a step as the plan predicts them. */
  readonly predictedPerStep: number;
}

/** Seconds a step: measured on the run itself, else predicted and corrected by how far predictions were off so far. */
export function secondsPerStep(run: RunPace, correction: number): number {
  const { steps, seconds } = run.measured;
  return steps > 0 ? seconds / steps : run.predictedPerStep * correction;
}

/**
 * When the last run ends if every run takes its longest; not after the deadline. Null once all are done. `correction` is
 * measured over predicted seconds a step.
 */
export function predictedEndMs(
  runs: readonly RunPace[],
  night: { correction: number; workers: number; nowMs: number; deadlineMs: number | null },
): number | null {
  const { correction, workers, nowMs, deadlineMs } = night;
  const open = runs.filter((run) => !run.done);
  if (open.length === 0) return null;
  const left = open.map((run) => Math.max(0, run.longestSteps - run.steps) * secondsPerStep(run, correction));
  // Neither can the work be shared better than evenly, nor one run be split.
  const seconds = Math.max(left.reduce((sum, s) => sum + s, 0) / workers, ...left);
  const end = nowMs + 1000 * seconds;
  return deadlineMs === null ? end : Math.min(end, deadlineMs);
}

/** Steps until every demanded channel has probably enough samples; the rest of the longest run where nothing is known. */
export function stepsNeeded(
  judgement: HistoryJudgement | null,
  channels: readonly string[],
  run: Pick<RunPace, "steps" | "longestSteps">,
): number {
  const rest = Math.max(0, run.longestSteps - run.steps);
  if (judgement === null) return rest;
  let total = run.steps;
  for (const name of channels) {
    const channel = judgement.channels[name];
    if (channel === undefined || channel.verdict === "accepted") continue;
    if (channel.samplesNeeded === null) return rest;
    const [low, high] = channel.samplesNeeded;
    total = Math.max(total, (low + high) / 2);
  }
  return Math.min(rest, Math.max(0, total - run.steps));
}
