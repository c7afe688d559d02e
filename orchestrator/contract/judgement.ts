import type { Verdict } from "./verdict.ts";

/** A stretch of samples, half open: `fromIndex` is in, `toIndex` is not; `toTime` is the time of the last sample in. */
export interface AveragingWindow {
  readonly fromIndex: number;
  readonly toIndex: number;
  readonly fromTime: number;
  readonly toTime: number;
}

/** One test of the judgement, with its outcome in a sentence. */
export interface TestResult {
  readonly name: string;
  readonly statistic: number;
  readonly limit: number;
  /** Null where the test has no p-value. */
  readonly p: number | null;
  readonly passed: boolean;
  readonly words: string;
}

/** The period over which cycles were averaged. */
export interface FoundPeriod {
  readonly samples: number;
  readonly cycles: number;
  readonly source: "declared" | "found";
}

/** What may be done with the average of one channel, and why. */
export interface ChannelJudgement {
  readonly verdict: Verdict;
  /** The value to hand out when accepted: the centre of the interval. Null where nothing could be estimated. */
  readonly mean: number | null;
  /** The plain average over the window, beside the value. */
  readonly plainMean: number | null;
  readonly halfWidth: number | null;
  readonly confidence: number;
  /** Absolute tolerance the half-width was held against; null when none was asked for. */
  readonly tolerance: number | null;
  readonly window: AveragingWindow | null;
  readonly effectiveSamples: number | null;
  readonly period: FoundPeriod | null;
  readonly warnings: readonly string[];
  /** Total samples from the start that would probably do, low and high; null where more would not help or none are needed. */
  readonly samplesNeeded: readonly [number, number] | null;
  /** Largest rise of the mean over the window that the data still allow. */
  readonly hiddenDrift: number | null;
  readonly tests: readonly TestResult[];
  /** The judgement in a sentence: what was found and what to do. */
  readonly words: string;
}

/** How a history goes wrong; see the glossary of the checks for what each looks like. */
export type OnsetKind =
  | "blow-up"
  | "growing-oscillation"
  | "wake-breakdown"
  | "mean-shift"
  | "spike-cluster"
  | "non-finite"
  | "no-stable-baseline";

/** Where and how a history goes wrong. `no-stable-baseline` names no place: its index, time and band are null. */
export interface Onset {
  readonly kind: OnsetKind;
  readonly channel: string;
  readonly index: number | null;
  readonly time: number | null;
  /** First and last index between which the onset lies, at about 95 %. */
  readonly band: readonly [number, number] | null;
  /** Growth of the amplitude in e-folds a step; null for abrupt kinds. */
  readonly growthPerStep: number | null;
  /** Sample at which the running monitor spoke up. */
  readonly alarmIndex: number;
  /** Samples before this index may still be averaged; the guard lies between it and the onset. Null: all of them (mean shift). */
  readonly trustedEndIndex: number | null;
  /** Channels that alarmed, the first one first. */
  readonly channelsAgreeing: readonly string[];
  readonly words: string;
}

/** The judgement of one history. */
export interface HistoryJudgement {
  readonly samples: number;
  readonly dt: number;
  readonly onset: Onset | null;
  /** Things noticed that condemn nothing: isolated spikes, resampled time. */
  readonly notes: readonly string[];
  readonly channels: Readonly<Record<string, ChannelJudgement>>;
}
