import type { NightEvent, RunName } from "../../orchestrator/night/index.ts";

/** What one worker is doing. */
export interface WorkerPicture {
  readonly run: RunName;
  readonly attempt: number;
  readonly step: number;
  readonly longestSteps: number;
  readonly secondsLeft: number | null;
}

/** A night that is going on, as it stands now. */
export interface LiveNight {
  readonly campaign: string;
  readonly runs: number;
  readonly done: number;
  readonly verdicts: Readonly<Record<string, number>>;
  readonly deadlineMs: number | null;
  readonly predictedEndMs: number | null;
  /** One entry a worker; null where it is idle. */
  readonly workers: readonly (WorkerPicture | null)[];
}

/** Folds the events of a night into the picture of it; null before it has begun and after it has ended. */
export function nextPicture(before: LiveNight | null, event: NightEvent): LiveNight | null {
  if (event.kind === "begun")
    return {
      campaign: event.campaign,
      runs: event.runs,
      done: event.done,
      verdicts: {},
      deadlineMs: event.deadlineMs,
      predictedEndMs: null,
      workers: Array.from({ length: event.workers }, () => null),
    };
  if (before === null || event.kind === "ended") return null;
  switch (event.kind) {
    case "progress":
      return { ...before, workers: before.workers.with(event.worker, workerPicture(event)) };
    case "idle":
      return { ...before, workers: before.workers.with(event.worker, null) };
    case "tally": {
      const { runs, done, verdicts, predictedEndMs } = event;
      return { ...before, runs, done, verdicts, predictedEndMs };
    }
    default:
      return before;
  }
}

function workerPicture(event: Extract<NightEvent, { kind: "progress" }>): WorkerPicture {
  const { run, attempt, step, longestSteps, secondsLeft } = event;
  return { run, attempt, step, longestSteps, secondsLeft };
}
