import { AppError } from "../orchestrator/contract/index.ts";
import { firstNonFinite, resample } from "./estimators/index.ts";

/** Steps may differ by this share of their average before the record is resampled. */
const UNEVEN_SHARE = 1e-3;
/** Resampling makes a record at most this many times longer, however small its smallest step is. */
const LONGER_MAX = 4;

/** A record of one or more channels over one column of times. */
export interface TimedHistory {
  /** shape [n], strictly rising. */
  readonly times: Float64Array;
  /** shape [n] each, by name. */
  readonly channels: Readonly<Record<string, Float64Array>>;
}

/** The same record at even steps, and the way back to the samples as they were given. */
export interface EvenHistory extends TimedHistory {
  readonly dt: number;
  readonly notes: readonly string[];
  /** Index in the given record of the first sample at or after an index of this one. */
  givenIndex(index: number): number;
}

/**
 * Brings a record to even steps: as it is if its steps agree to 0.1 %, else by straight lines to the smallest step.
 *
 * @param history n >= 1, rising times, channels of the same length
 * @returns the record, its step, what was done, and the way back
 * @throws HISTORY_INVALID for no samples, times that do not rise or are no numbers, and channels of another length
 */
export function evenHistory(history: TimedHistory): EvenHistory {
  const { times, channels } = history;
  const n = times.length;
  checkHistory(history);
  if (n === 1) return { ...history, dt: 1, notes: ["one sample: the step is unknown"], givenIndex: (i) => i };
  const dt = (times[n - 1]! - times[0]!) / (n - 1);
  const { least, most } = steps(times);
  if (most - least <= UNEVEN_SHARE * dt) return { ...history, dt, notes: [], givenIndex: (i) => i };
  const step = Math.max(least, dt / LONGER_MAX);
  const ramp = resample(times, times, step);
  const even = Object.entries(channels).map(([name, x]) => [name, resampled(times, x, step, ramp.length)]);
  const note = `steps are uneven (${least.toPrecision(3)} to ${most.toPrecision(3)}): resampled by straight lines to ${step.toPrecision(3)}`;
  return {
    times: ramp,
    channels: Object.fromEntries(even),
    dt: step,
    notes: [note],
    givenIndex: (index) => firstAtOrAfter(times, times[0]! + index * step - 1e-9 * step),
  };
}

function checkHistory({ times, channels }: TimedHistory): void {
  if (times.length === 0)
    throw new AppError("HISTORY_INVALID", "the history holds no samples", {
      fix: "give at least one row of numbers below the header",
    });
  const bad = firstNonFinite(times);
  if (bad !== null)
    throw new AppError("HISTORY_INVALID", `time is ${times[bad]} there`, {
      where: `sample ${bad}`,
      fix: "give every sample a time",
    });
  for (let i = 1; i < times.length; i++) {
    if (times[i]! > times[i - 1]!) continue;
    throw new AppError("HISTORY_INVALID", `time goes from ${times[i - 1]} to ${times[i]}`, {
      where: `sample ${i}`,
      fix: "sort the samples by time and keep one for each time; or name the column that holds time",
    });
  }
  for (const [name, x] of Object.entries(channels)) {
    if (x.length === times.length) continue;
    throw new AppError("HISTORY_INVALID", `${x.length} values for ${times.length} times`, {
      where: `channel ${name}`,
      fix: "give the channel one value for every time",
    });
  }
}

function steps(times: Float64Array): { least: number; most: number } {
  let least = Number.POSITIVE_INFINITY;
  let most = 0;
  for (let i = 1; i < times.length; i++) {
    const step = times[i]! - times[i - 1]!;
    if (step < least) least = step;
    if (step > most) most = step;
  }
  return { least, most };
}

/** What follows the first value that is no number is not a number either. */
function resampled(times: Float64Array, x: Float64Array, step: number, length: number): Float64Array {
  const sound = firstNonFinite(x) ?? x.length;
  const out = new Float64Array(length).fill(Number.NaN);
  if (sound >= 2) out.set(resample(times.subarray(0, sound), x.subarray(0, sound), step));
  return out;
}

function firstAtOrAfter(times: Float64Array, t: number): number {
  let low = 0;
  let high = times.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (times[middle]! < t) low = middle + 1;
    else high = middle;
  }
  return low;
}
