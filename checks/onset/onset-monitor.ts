import { AppError } from "../../orchestrator/contract/index.ts";
import type { ChannelBound, OnsetAlarm } from "./alarm.ts";
import { ChannelMonitor } from "./channel-monitor.ts";
import { type MonitorLayout, monitorLayout } from "./monitor-layout.ts";

/** What the monitors of a run are told. */
export interface OnsetMonitorOptions {
  /** Names of the channels, in the order of the samples. */
  readonly channels: readonly string[];
  /** Periods that the signals are known to carry, steps; need not be whole. */
  readonly periodsSteps: readonly number[];
  /** Length that the run is meant to have, steps. */
  readonly plannedSteps: number;
  /** Bounds beyond which a channel is lost, by name. */
  readonly bounds?: Readonly<Record<string, ChannelBound>>;
  /** Multiplies what has to be seen before an alarm; 1 is the tested setting, below 1 speaks up earlier. */
  readonly sensitivity?: number;
}

/** Watches a run while it goes. */
export interface OnsetMonitor {
  readonly layout: MonitorLayout;
  /** Whether every channel has a stable reference to compare with. */
  readonly armed: boolean;
  /** Every alarm so far, the earliest first; those of one sample in the order of the channels. Warnings are among them. */
  readonly alarms: readonly OnsetAlarm[];
  /** Things noticed that stop nothing, in sentences. */
  readonly notes: readonly string[];
  /** Takes the next sample of all channels; returns the first alarm at it that stops the run, or null. */
  push(sample: ArrayLike<number>): OnsetAlarm | null;
}

/**
 * Makes the monitors of one run. They depend on the samples alone, in their order: a run that is cut into legs and
 * replayed gives the same alarms.
 *
 * @throws USAGE for a sample of the wrong length, for no channels, and for a sensitivity that is not above zero
 */
export function createOnsetMonitor(options: OnsetMonitorOptions): OnsetMonitor {
  const { channels, sensitivity = 1, bounds = {} } = options;
  checkOptions(channels, sensitivity);
  const layout = monitorLayout(options.periodsSteps, options.plannedSteps);
  const monitors = channels.map(
    (channel) => new ChannelMonitor({ channel, layout, bound: bounds[channel] ?? {}, sensitivity }),
  );
  const alarms: OnsetAlarm[] = [];
  const known = new Int32Array(monitors.length);
  const push = (sample: ArrayLike<number>): OnsetAlarm | null => {
    if (sample.length !== monitors.length) throw wrongLength(sample.length, monitors.length);
    let first: OnsetAlarm | null = null;
    for (let i = 0; i < monitors.length; i++) {
      const monitor = monitors[i]!;
      const alarm = monitor.push(sample[i]!);
      first ??= alarm;
      while (known[i]! < monitor.alarms.length) alarms.push(monitor.alarms[known[i]!++]!);
    }
    return first;
  };
  return {
    layout,
    alarms,
    push,
    get armed() {
      return monitors.every((m) => m.armed);
    },
    get notes() {
      return [...layoutNotes(layout), ...monitors.flatMap((m, i) => channelNotes(m, channels[i]!))];
    },
  };
}

function layoutNotes(layout: MonitorLayout): string[] {
  return layout.ignoredPeriods.map(
    (p) =>
      `The period of ${round(p)} steps is too long for the run's onset monitors to learn; they do without it.`,
  );
}

function channelNotes(monitor: ChannelMonitor, channel: string): string[] {
  const notes: string[] = [];
  const { count, first } = monitor.spikesSeen;
  if (count === 1) notes.push(`${channel} has an isolated spike at sample ${first}.`);
  if (count > 1) notes.push(`${channel} has ${count} spikes, the first at sample ${first}.`);
  for (const alarm of monitor.alarms) {
    if (alarm.stops) continue;
    notes.push(
      `The mean of ${channel} may have shifted near sample ${alarm.suspectIndex} (seen at sample ${alarm.alarmIndex}).`,
    );
  }
  return notes;
}

function checkOptions(channels: readonly string[], sensitivity: number): void {
  if (channels.length === 0) {
    throw new AppError("USAGE", "the onset monitors got no channels", { fix: "name at least one channel" });
  }
  if (!(sensitivity > 0 && Number.isFinite(sensitivity))) {
    throw new AppError("USAGE", `the onset sensitivity is ${sensitivity}`, {
      where: "onset.sensitivity",
      fix: "give a number above 0; 1 is the tested setting",
    });
  }
}

function wrongLength(got: number, wanted: number): AppError {
  return new AppError("USAGE", `a sample of ${got} values came for ${wanted} channels`, {
    fix: "give one value for every channel, in the order in which the channels were named",
  });
}

function round(steps: number): string {
  return String(Number(steps.toPrecision(6)));
}
