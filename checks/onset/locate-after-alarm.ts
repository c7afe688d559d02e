import { AppError, type Onset } from "../../orchestrator/contract/index.ts";
import type { OnsetAlarm } from "./alarm.ts";
import { isGrowthBeforeEnd } from "./growth-end.ts";
import { locateGrowth } from "./locate-growth.ts";
import { locateMeanShift } from "./locate-mean-shift.ts";
import { locateSpikes } from "./locate-spikes.ts";
import type { Located } from "./located.ts";
import { type MonitorLayout, monitorLayout } from "./monitor-layout.ts";
import { noBaselineWords, onsetWords } from "./onset-words.ts";
import { trustedEnd } from "./trusted-end.ts";

/** A history so far: the alarm's channel has to be among the channels. */
export interface RunHistory {
  /** shape [n], rising. */
  readonly times: ArrayLike<number>;
  /** shape [n] each, by name. */
  readonly channels: Readonly<Record<string, Float64Array>>;
}

/** What the locator is told; periods and length as the monitors were told. */
interface LocateOptions {
  readonly periodsSteps: readonly number[];
  readonly plannedSteps: number;
  /** All alarms so far, for the channels that agree. */
  readonly alarms?: readonly OnsetAlarm[];
}

/** Blocks between the skipped start and an onset without which there is no baseline. */
const BASELINE_BLOCKS_MIN = 4;
/** Blocks between the skipped start and the band; where the band is wide, an onset well inside the run will do. */
const BAND_BLOCKS_MIN = 2;
const INSIDE_BLOCKS = 15;
/** Blocks between a shift of the mean and later trouble that make them two events. */
const SHIFT_BLOCKS_MIN = 12;
/** Blocks after the first alarm within which another channel agrees. */
const AGREE_BLOCKS = 10;

/**
 * Locates the trouble behind an alarm, says what it is, and where the trusted stretch ends.
 *
 * Works on the history up to the alarm, live, and uses up to 20 blocks after it where they exist.
 *
 * @throws USAGE where the history lacks the alarm's channel or ends before the alarm
 */
export function locateAfterAlarm(history: RunHistory, alarm: OnsetAlarm, options: LocateOptions): Onset {
  const x = history.channels[alarm.channel];
  if (x === undefined || alarm.alarmIndex >= x.length) {
    throw new AppError("USAGE", `the history does not reach the alarm of ${alarm.channel}`, {
      where: `sample ${alarm.alarmIndex}`,
      fix: "pass the history that the monitors have seen",
    });
  }
  const layout = monitorLayout(options.periodsSteps, options.plannedSteps);
  const agreeing = channelsAgreeing(alarm, options.alarms ?? [], layout);
  const located = locate(x, alarm, { ...layout, skip: soundFrom(x, alarm, options.alarms ?? [], layout) });
  if (located === null || !hasBaseline(located, layout)) return noBaseline(alarm, agreeing);
  const band = withinHistory(located, x.length);
  const facts = {
    kind: located.kind,
    channel: alarm.channel,
    index: located.index,
    time: history.times[located.index] ?? Number.NaN,
    band,
    growthPerStep: located.growthPerStep,
    trustedEndIndex: trustedEnd({ ...located, band }, layout),
  };
  return {
    ...facts,
    alarmIndex: alarm.alarmIndex,
    channelsAgreeing: agreeing,
    words: onsetWords({ ...facts, agreeing: agreeing.length }),
  };
}

function locate(x: Float64Array, alarm: OnsetAlarm, layout: MonitorLayout): Located | null {
  const firstBad = x.findIndex((v) => !Number.isFinite(v));
  const to = firstBad < 0 ? x.length : firstBad;
  const index = alarm.alarmIndex;
  switch (alarm.source) {
    case "non-finite": {
      if (index < layout.skip) return null;
      if (isGrowthBeforeEnd(x, layout, to))
        return locateGrowth(x, layout, { index: to - 1, suspect: to - 10, to, monotone: false });
      return { kind: "non-finite", index, band: [index, index], growthPerStep: null };
    }
    case "spikes":
      return locateSpikes(x, layout, { suspect: alarm.suspectIndex, to });
    case "mean-shift":
      return locateMeanShift(x, layout, { suspect: alarm.suspectIndex, to });
    default:
      if (!alarm.armed) return null;
      return locateGrowth(x, layout, {
        index,
        suspect: alarm.suspectIndex,
        to,
        monotone: alarm.source === "monotone",
      });
  }
}

/** Where the stretch that the alarm is held against begins: after the start, and after an earlier shift of the mean. */
function soundFrom(
  x: Float64Array,
  alarm: OnsetAlarm,
  alarms: readonly OnsetAlarm[],
  layout: MonitorLayout,
): number {
  const shift = alarms.find((a) => a.source === "mean-shift" && a.channel === alarm.channel);
  const latest = alarm.suspectIndex - SHIFT_BLOCKS_MIN * layout.block;
  if (shift === undefined || shift === alarm || shift.suspectIndex > latest) return layout.skip;
  return locateMeanShift(x, layout, { suspect: shift.suspectIndex, to: alarm.suspectIndex }).index + 1;
}

function hasBaseline(located: Located, { skip, block }: MonitorLayout): boolean {
  const blocksBefore = (index: number) => (index - skip) / block;
  const onset = blocksBefore(located.index);
  if (onset < BASELINE_BLOCKS_MIN) return false;
  return blocksBefore(located.band[0]) >= BAND_BLOCKS_MIN || onset >= INSIDE_BLOCKS;
}

function channelsAgreeing(alarm: OnsetAlarm, alarms: readonly OnsetAlarm[], layout: MonitorLayout): string[] {
  const latest = alarm.alarmIndex + AGREE_BLOCKS * layout.block;
  const others = alarms.filter((a) => a.alarmIndex <= latest && a.stops === alarm.stops);
  return [...new Set([alarm.channel, ...others.map((a) => a.channel)])];
}

function withinHistory(located: Located, length: number): readonly [number, number] {
  const [first, last] = located.band;
  const low = Math.max(0, Math.min(first, located.index));
  return [low, Math.min(length - 1, Math.max(last, located.index))];
}

function noBaseline(alarm: OnsetAlarm, agreeing: readonly string[]): Onset {
  return {
    kind: "no-stable-baseline",
    channel: alarm.channel,
    index: null,
    time: null,
    band: null,
    growthPerStep: null,
    alarmIndex: alarm.alarmIndex,
    trustedEndIndex: 0,
    channelsAgreeing: agreeing,
    words: noBaselineWords(alarm.channel, alarm.alarmIndex, alarm.source === "non-finite"),
  };
}
