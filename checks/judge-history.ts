import type { ChannelJudgement, HistoryJudgement, Onset, Tolerance } from "../orchestrator/contract/index.ts";
import { type EvenHistory, evenHistory, type TimedHistory } from "./even-history.ts";
import { judgeBesideOnset } from "./judge-beside-onset.ts";
import { type ChannelBound, locateOnset } from "./onset/index.ts";

/** How a whole history is to be judged. */
export interface JudgeHistoryOptions {
  /** For every channel that has none of its own; null or left out: 1 % of the mean. */
  readonly tolerance?: Tolerance | null | undefined;
  /** Tolerances of single channels, by name. */
  readonly tolerances?: Readonly<Record<string, Tolerance>> | undefined;
  /** By default 0.95. */
  readonly confidence?: number | undefined;
  /** Periods known to be there, in samples of the history as given. */
  readonly periods?: readonly number[] | undefined;
  /** The same in units of time. */
  readonly periodTimes?: readonly number[] | undefined;
  /** Samples that the run was planned for; by default those it has. */
  readonly plannedSamples?: number | undefined;
  readonly fromDeveloped?: boolean | undefined;
  /** Fewest samples before anything is accepted. */
  readonly samplesMin?: number | undefined;
  /** Multiplies what the onset monitors need to see; by default 1. */
  readonly sensitivity?: number | undefined;
  /** Bounds beyond which a channel is lost, by name. */
  readonly bounds?: Readonly<Record<string, ChannelBound>> | undefined;
}

/**
 * Judges a finished history: is the run sound, and if so far, may its averages be used and how well are they known.
 *
 * All channels are watched for onset together; an onset in any of them cuts all of them. See `judgeBesideOnset` for
 * what an onset does to an average.
 *
 * @param given n >= 1 samples at rising times, oldest first, from the impulsive start unless `fromDeveloped`
 * @returns onset, notes, and a judgement for every channel; indices refer to the history as given
 * @throws HISTORY_INVALID for no samples, falling times or channels of another length; USAGE for options out of range
 */
export function judgeHistory(given: TimedHistory, options: JudgeHistoryOptions = {}): HistoryJudgement {
  const history = evenHistory(given);
  const scale = history.times.length / given.times.length;
  const periods = [
    ...(options.periods ?? []).map((period) => period * scale),
    ...(options.periodTimes ?? []).map((period) => period / history.dt),
  ];
  const planned = (options.plannedSamples ?? given.times.length) * scale;
  const watched = Object.keys(history.channels).length === 0 ? null : history;
  const found = watched && locateOnset(watched, onsetOptions(options, periods, Math.round(planned)));
  const onset = found?.onset ?? null;
  const judged = Object.entries(history.channels).map(([name, x]) => {
    const judgement = judgeBesideOnset(x, onset, {
      dt: history.dt,
      times: history.times,
      tolerance: options.tolerances?.[name] ?? options.tolerance,
      confidence: options.confidence,
      periods,
      fromDeveloped: options.fromDeveloped,
      samplesMin: (options.samplesMin ?? 0) * scale,
    });
    return [name, windowAsGiven(judgement, history)] as const;
  });
  return {
    samples: given.times.length,
    dt: history.dt,
    onset: onset && onsetAsGiven(onset, history),
    notes: [...history.notes, ...(found?.notes ?? [])],
    channels: Object.fromEntries(judged),
  };
}

function onsetOptions(options: JudgeHistoryOptions, periodsSteps: readonly number[], plannedSteps: number) {
  return {
    periodsSteps,
    plannedSteps,
    ...(options.bounds === undefined ? {} : { bounds: options.bounds }),
    ...(options.sensitivity === undefined ? {} : { sensitivity: options.sensitivity }),
  };
}

function windowAsGiven(judgement: ChannelJudgement, { givenIndex }: EvenHistory): ChannelJudgement {
  const { window } = judgement;
  if (window === null) return judgement;
  const asGiven = {
    ...window,
    fromIndex: givenIndex(window.fromIndex),
    toIndex: givenIndex(window.toIndex - 1) + 1,
  };
  return { ...judgement, window: asGiven };
}

function onsetAsGiven(onset: Onset, { givenIndex }: EvenHistory): Onset {
  const place = (index: number | null) => (index === null ? null : givenIndex(index));
  return {
    ...onset,
    index: place(onset.index),
    band: onset.band && [givenIndex(onset.band[0]), givenIndex(onset.band[1])],
    alarmIndex: givenIndex(onset.alarmIndex),
    trustedEndIndex: place(onset.trustedEndIndex),
  };
}
