import type {
  ChannelInfo,
  DeclaredPeriod,
  HistoryJudgement,
  Plan,
  PlannedRun,
  RunRole,
  Verdict,
} from "../contract/index.ts";

/** How far a run of a campaign is; `verdict` says how it ended once it is `done`. */
export type RunState = "waiting" | "running" | "done";

/** Why a run of a campaign stopped. */
export type StopCause = "accepted" | "onset" | "longest" | "failed";

/** How a campaign stands. */
export type CampaignStanding = "ready" | "running" | "paused" | "stopped" | "done";

/** A campaign in a list. */
export interface CampaignSummary {
  readonly campaign: string;
  readonly title: string;
  readonly standing: CampaignStanding;
  readonly createdMs: number;
  /** End of the last night that was given to it; null for none. */
  readonly deadlineMs: number | null;
  readonly runs: number;
  readonly done: number;
  readonly verdicts: Readonly<Partial<Record<Verdict, number>>>;
  readonly computeSeconds: number;
}

/** The remedy under which an attempt was computed. */
export interface AppliedRemedy {
  readonly name: string;
  readonly cost: string;
  readonly set: Readonly<Record<string, unknown>>;
}

/** One run as one campaign sees it. */
export interface CampaignRun {
  readonly campaign: string;
  readonly runId: string;
  readonly number: number;
  /** Place in the order of the night, from 0. */
  readonly place: number;
  readonly role: RunRole;
  readonly label: string;
  readonly varied: PlannedRun["varied"];
  readonly planned: PlannedRun;
  readonly state: RunState;
  /** Attempt that the verdict (or the work going on) is about. */
  readonly attempt: number;
  readonly remedy: AppliedRemedy | null;
  /** Null until the run is done. */
  readonly verdict: Verdict | null;
  /** Judgement at the last look, final once the run is done. */
  readonly judgement: HistoryJudgement | null;
  /** Why the verdict is what it is, in a sentence; null until the run is done. */
  readonly reason: string | null;
  readonly stopCause: StopCause | null;
  /** Steps of the current attempt that count for this campaign. */
  readonly steps: number;
  /** Longest run of the current attempt, in its own steps. */
  readonly longestSteps: number;
  /** Legs committed for this campaign. */
  readonly legs: number;
  /** Seconds of processor time spent for this campaign on this run, all attempts together. */
  readonly seconds: number;
  readonly channels: readonly ChannelInfo[];
  readonly dtSeconds: number;
}

/** A campaign with all its runs, in the listing's order. */
export interface CampaignState extends CampaignSummary {
  readonly plan: Plan;
  readonly list: readonly CampaignRun[];
}

/** One try at a run, whoever asked for it. */
export interface AttemptDetail {
  readonly attempt: number;
  /** Changed fields and their values; empty for the case as planned. */
  readonly settings: Readonly<Record<string, unknown>>;
  readonly steps: number;
  readonly seconds: number;
  /** Null while it can be continued; else why it cannot. */
  readonly endedBecause: string | null;
  /** Last lines of output of a process that died. */
  readonly output: readonly string[];
  readonly channels: readonly ChannelInfo[];
  readonly periods: readonly DeclaredPeriod[];
  readonly dtSeconds: number;
  readonly legs: number;
}

/** What one campaign made of one attempt before it went on to the next. */
export interface PastAttempt {
  readonly attempt: number;
  readonly remedy: AppliedRemedy | null;
  readonly verdict: Verdict;
  readonly reason: string;
  readonly steps: number;
  readonly judgement: HistoryJudgement | null;
}

/** A run with its attempts and every campaign that asked for it. */
export interface RunDetail {
  readonly runId: string;
  readonly solver: string;
  readonly modelVersion: string;
  readonly inputs: Readonly<Record<string, unknown>>;
  readonly attempts: readonly AttemptDetail[];
  readonly campaigns: readonly (CampaignRun & { readonly past: readonly PastAttempt[] })[];
}
