import type { LegRunner, Plan, RunRole, Verdict } from "../contract/index.ts";
import type { DataFolder } from "../store/data-folder.ts";
import type { AppliedRemedy, CampaignRun, StopCause } from "../store/rows.ts";

/** What a night needs. */
export interface NightOptions {
  readonly folder: DataFolder;
  /** The campaign, expanded. A campaign already in the folder goes on from where it was. */
  readonly plan: Plan;
  /** Computes legs; its size is the number of runs computed at a time. */
  readonly runner: LegRunner;
  /** Milliseconds since the epoch. */
  readonly now: () => number;
  readonly onEvent: (event: NightEvent) => void;
  /** Seconds of compute from checkpoint to checkpoint; 5 unless given. */
  readonly legSeconds?: number;
  /** Bytes of disk below which the night pauses before anything can be half-written. */
  readonly reserveBytes?: number;
}

/** A night that is going on. */
export interface Night {
  /** Resolves when nothing runs any more and everything is committed; rejects only for bugs. */
  readonly done: Promise<NightSummary>;
  /** Checkpoints what runs and ends the night; resolves with `done`. */
  stop(): Promise<NightSummary>;
}

/** Why a night ended. */
export type NightEnd = "all-done" | "deadline" | "stopped" | "disk-full" | "damaged";

/** What a night came to. */
export interface NightSummary {
  readonly campaign: string;
  readonly endedBy: NightEnd;
  /** What stood in the way and what to do, for `disk-full` and `damaged`. */
  readonly trouble: { readonly what: string; readonly where: string; readonly fix: string } | null;
  readonly startedMs: number;
  readonly endedMs: number;
  readonly runs: number;
  readonly done: number;
  readonly verdicts: Readonly<Partial<Record<Verdict, number>>>;
  readonly legs: number;
  /** Seconds of processor time spent stepping in this night. */
  readonly computeSeconds: number;
  /** Seconds of processor time that runs ended before their longest run would still have taken, at the speed they had. */
  readonly savedSeconds: number;
}

/** Who an event is about. */
export interface RunName {
  readonly runId: string;
  readonly number: number;
  readonly label: string;
}

/** What can be watched while the night goes on. */
export type NightEvent =
  | {
      readonly kind: "begun";
      readonly campaign: string;
      readonly runs: number;
      readonly done: number;
      readonly workers: number;
      readonly deadlineMs: number | null;
    }
  /** About four times a second for every run that is being computed. */
  | {
      readonly kind: "progress";
      /** Which of the workers, from 0. */
      readonly worker: number;
      readonly run: RunName;
      readonly attempt: number;
      readonly step: number;
      readonly longestSteps: number;
      /** Until the longest run is reached, at the speed measured. */
      readonly secondsLeft: number | null;
    }
  /** The worker has nothing to do for the moment. */
  | { readonly kind: "idle"; readonly worker: number }
  | {
      readonly kind: "tally";
      readonly runs: number;
      readonly done: number;
      readonly verdicts: Readonly<Partial<Record<Verdict, number>>>;
      /** When the last run ends if every run takes its longest, at the speeds measured; not after the deadline. */
      readonly predictedEndMs: number | null;
    }
  | {
      readonly kind: "attempt";
      readonly run: RunName;
      readonly attempt: number;
      readonly remedy: string;
      readonly reason: string;
    }
  | { readonly kind: "run-done"; readonly run: CampaignRun }
  | { readonly kind: "notice"; readonly words: string }
  | { readonly kind: "ended"; readonly summary: NightSummary };

/** One demanded channel of one run: a row of the loads. */
export interface LoadRow {
  readonly campaign: string;
  readonly runId: string;
  readonly number: number;
  readonly label: string;
  readonly role: RunRole;
  readonly varied: CampaignRun["varied"];
  readonly channel: string;
  readonly unit: string;
  readonly what: string;
  /** Whether the value may be used: the run is done and this channel and the run are accepted. */
  readonly accepted: boolean;
  /** Verdict of the channel; null where it was never judged. */
  readonly verdict: Verdict | null;
  readonly runVerdict: Verdict | null;
  /** Why it is not accepted, or what accepted it. */
  readonly reason: string;
  readonly mean: number | null;
  readonly halfWidth: number | null;
  readonly plainMean: number | null;
  readonly confidence: number;
  readonly tolerance: number | null;
  readonly effectiveSamples: number | null;
  readonly window: {
    readonly fromStep: number;
    readonly toStep: number;
    readonly fromTime: number;
    readonly toTime: number;
  } | null;
  readonly warnings: readonly string[];
  readonly remedy: AppliedRemedy | null;
  readonly stopCause: StopCause | null;
  readonly attempt: number;
  readonly steps: number;
  readonly uncertainty: UncertaintyBudget;
}

/** What the value of a load may be off by, part by part; never summed with the statistical part. */
export interface UncertaintyBudget {
  /** Half-width of the interval. */
  readonly statistical: number | null;
  /** Difference to each companion that tests the run's sufficiency, where both were averaged. */
  readonly sufficiency: readonly {
    readonly aspect: "wake-length" | "step" | "strips";
    readonly companionRunId: string;
    /** Companion less run. */
    readonly difference: number;
    readonly exceedsTolerance: boolean;
  }[];
}
