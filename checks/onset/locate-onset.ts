import { AppError, type Onset } from "../../orchestrator/contract/index.ts";
import type { ChannelBound } from "./alarm.ts";
import { locateAfterAlarm, type RunHistory } from "./locate-after-alarm.ts";
import { createOnsetMonitor, type OnsetMonitor } from "./onset-monitor.ts";

/** Blocks that are still read after the first alarm, to see which channels agree. */
const BLOCKS_AFTER = 10;
/** Width of a mean shift's band from which it is no step. */
const VAGUE_BLOCKS = 1.5;

/** What a whole history is judged with. */
interface OnsetOptions {
  readonly periodsSteps: readonly number[];
  readonly plannedSteps: number;
  readonly bounds?: Readonly<Record<string, ChannelBound>>;
  readonly sensitivity?: number;
}

/** The onset of a whole history, and what was noticed beside it. */
interface OnsetFinding {
  /** The first trouble that stops a run; else the first shift of a mean; null for a sound history. */
  readonly onset: Onset | null;
  readonly notes: readonly string[];
}

/**
 * Runs the monitors over a whole history and locates what they find.
 *
 * @param history channels of equal length
 * @throws USAGE for no channels, for channels of different length, and for a sensitivity that is not above zero
 */
export function locateOnset(history: RunHistory, options: OnsetOptions): OnsetFinding {
  const names = Object.keys(history.channels);
  const columns = names.map((name) => history.channels[name]!);
  checkLengths(names, columns, history.times.length);
  const monitor = createOnsetMonitor({ ...options, channels: names });
  readThrough(monitor, columns, history.times.length);
  const alarm = monitor.alarms.find((a) => a.stops) ?? monitor.alarms[0];
  if (alarm === undefined) return { onset: null, notes: monitor.notes };
  const onset = locateAfterAlarm(history, alarm, { ...options, alarms: monitor.alarms });
  return { onset: isVague(onset, monitor.layout.block) ? null : onset, notes: monitor.notes };
}

/** A shift of the mean that cannot be placed is slow noise, and stays a note. */
function isVague({ kind, band }: Onset, block: number): boolean {
  return kind === "mean-shift" && band !== null && band[1] - band[0] > VAGUE_BLOCKS * block;
}

/** Pushes every sample until some blocks after the first alarm that stops the run. */
function readThrough(monitor: OnsetMonitor, columns: readonly Float64Array[], length: number): void {
  const sample = new Float64Array(columns.length);
  let end = length;
  for (let t = 0; t < end; t++) {
    for (let i = 0; i < sample.length; i++) sample[i] = columns[i]![t]!;
    if (monitor.push(sample) && end === length) {
      end = Math.min(length, t + 1 + BLOCKS_AFTER * monitor.layout.block);
    }
  }
}

function checkLengths(names: readonly string[], columns: readonly Float64Array[], length: number): void {
  const odd = columns.findIndex((c) => c.length !== length);
  if (odd < 0) return;
  throw new AppError("USAGE", `${names[odd]} has ${columns[odd]!.length} samples, time has ${length}`, {
    where: names[odd]!,
    fix: "give every channel one value for every time",
  });
}
