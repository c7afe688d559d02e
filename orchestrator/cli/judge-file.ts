import type { JudgeHistoryOptions, TimedHistory } from "../../checks/index.ts";
import { AppError, type HistoryJudgement, type Tolerance } from "../contract/index.ts";
import { type ForeignHistory, readHistoryFile } from "../histories/read-history-file.ts";
import { sixDigits } from "./format-value.ts";

/** How the histories of a command line are to be read and judged. */
export interface JudgeFileOptions {
  readonly tolerance?: Tolerance;
  readonly confidence: number;
  /** Periods in samples, and in the unit of time. */
  readonly period?: readonly number[];
  readonly periodTime?: readonly number[];
  /** Steps that the run was planned for. */
  readonly planned?: number;
  /** Column of time, and channels to judge; the first, and all, where none is named. */
  readonly time?: string;
  readonly channel?: readonly string[];
}

/**
 * Reads one history and judges it. `path` is opened, `shown` is the name that messages use.
 *
 * @throws what reading throws; USAGE where a period is shorter than the time step can show
 */
export async function judgeFile(
  path: string,
  shown: string,
  options: JudgeFileOptions,
): Promise<HistoryJudgement> {
  // Loaded when needed, so that the other commands start without it.
  const { judgeHistory } = await import("../../checks/index.ts");
  const history = await readHistoryFile(path, shown, { time: options.time, channels: options.channel });
  refuseShortPeriods(history, options, shown);
  const judged = judgeHistory(timedHistory(history), judgeOptions(options));
  return { ...judged, notes: [...history.notes, ...judged.notes] };
}

/** A period that the time step cannot show is a slip of the unit. */
function refuseShortPeriods({ time }: ForeignHistory, options: JudgeFileOptions, file: string): void {
  const dt = (time.at(-1)! - time[0]!) / (time.length - 1);
  const short = options.periodTime?.find((period) => period < 2 * dt);
  if (short === undefined) return;
  throw new AppError("USAGE", `a period of ${short} is shorter than two time steps of ${sixDigits(dt)}`, {
    where: `--period-time, for ${file}`,
    fix: "Give it in the unit of the time column. In samples it is --period.",
  });
}

function timedHistory({ time, channels }: ForeignHistory): TimedHistory {
  return { times: time, channels: Object.fromEntries(channels.map(({ name, values }) => [name, values])) };
}

function judgeOptions(options: JudgeFileOptions): JudgeHistoryOptions {
  return {
    tolerance: options.tolerance,
    confidence: options.confidence,
    periods: options.period,
    periodTimes: options.periodTime,
    plannedSamples: options.planned,
  };
}
