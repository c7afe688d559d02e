// What is remembered. PostgreSQL in the process (PGlite) behind a pool that node-postgres could replace; SQL is in this
// folder alone, and names its schema. Not here: the queue (../queue/) and what follows from what is stored (../night/).
// Read this file first, then schema-0001.ts and commit-leg.ts; open-data-folder.ts puts the parts together.
import type {
  ChannelInfo,
  CheckpointPiece,
  DeclaredPeriod,
  HistoryJudgement,
  HistoryPiece,
  Plan,
  Verdict,
} from "../contract/index.ts";
import type { Removal } from "./remove-campaign.ts";
import type {
  AppliedRemedy,
  CampaignRun,
  CampaignStanding,
  CampaignState,
  CampaignSummary,
  RunDetail,
  StopCause,
} from "./rows.ts";

/** What is remembered; the only way to the tables. */
export interface Store {
  /** Every campaign, newest first. */
  campaigns(): Promise<readonly CampaignSummary[]>;
  /**
   * One campaign with its runs in the listing's order.
   *
   * @throws NOT_FOUND naming the campaigns there are
   */
  campaignState(campaign: string): Promise<CampaignState>;
  /** One run as one campaign sees it now. */
  campaignRun(campaign: string, runId: string): Promise<CampaignRun>;
  /**
   * One run with its attempts and the campaigns that asked for it; the id may be shortened while it stays unique.
   *
   * @throws NOT_FOUND
   */
  runDetail(runId: string): Promise<RunDetail>;
  /** Pieces of an attempt's history, in order. */
  historyPieces(runId: string, attempt: number): Promise<readonly HistoryPiece[]>;
  /** Every file that the store refers to, relative to the folder. */
  files(): Promise<ReadonlySet<string>>;

  /** Puts a campaign into the store or brings it up to date; what is already judged by the same rules stays. */
  register(plan: Plan, nowMs: number): Promise<Registration>;
  /** Says how a campaign stands; a deadline that is left out stays. */
  setStanding(campaign: string, standing: CampaignStanding, deadlineMs?: number | null): Promise<void>;
  /** Marks a campaign as stopped until it is launched again. */
  markStop(campaign: string): Promise<void>;
  /**
   * Forgets a campaign, and every run that no other campaign asks for.
   *
   * @throws NOT_FOUND
   */
  remove(campaign: string): Promise<Removal>;

  /** Takes a leg; null when its ticket is out of date. What was claimed before on the same attempt can no longer be committed. */
  claim(campaign: string, runId: string, attempt: number, legs: number): Promise<LegClaim | null>;
  /** Writes all that a leg did in one transaction; `stale` and nothing written when it was claimed again since. */
  commit(commit: LegCommit): Promise<"committed" | "stale">;
  /** Counts the death of a process that was killed from outside; returns how many in a row. */
  countDeath(campaign: string, runId: string): Promise<number>;
}

/** What registering a campaign changed. */
export interface Registration {
  readonly isNew: boolean;
  readonly added: number;
  /** Runs judged anew because the campaign's rules for them changed. */
  readonly rejudged: number;
  /** Runs that the campaign no longer asks for; their histories stay. */
  readonly dropped: number;
}

/** A leg that may be computed now. */
export interface LegClaim {
  readonly campaign: string;
  readonly run: CampaignRun;
  readonly attempt: number;
  readonly fence: number;
  /** Inputs with the attempt's settings applied. */
  readonly inputs: Readonly<Record<string, unknown>>;
  readonly solver: string;
  readonly history: readonly HistoryPiece[];
  readonly checkpoint: CheckpointPiece | null;
  readonly judgedSteps: number;
  readonly endedBecause: string | null;
  /** Steps and seconds of the attempt so far, whoever asked for them. */
  readonly attemptSteps: number;
  readonly attemptSeconds: number;
}

/** All that a leg did, for one transaction. */
export interface LegCommit {
  readonly campaign: string;
  readonly runId: string;
  readonly attempt: number;
  readonly fence: number;
  readonly nowMs: number;
  readonly outcome: string;
  readonly fromStep: number;
  /** Seconds of processor time. */
  readonly seconds: number;
  /** What became of the attempt; null where the leg left it as it was. */
  readonly computed: {
    readonly history: (HistoryPiece & { readonly bytes: number }) | null;
    readonly checkpoint: CheckpointPiece | null;
    readonly steps: number;
    readonly channels: readonly ChannelInfo[];
    readonly periods: readonly DeclaredPeriod[];
    readonly dtSeconds: number;
  } | null;
  /** Why the attempt cannot be continued, with the last lines of output; null while it can. */
  readonly ended: { readonly because: string; readonly output: readonly string[] } | null;
  readonly judgedSteps: number;
  readonly steps: number;
  readonly longestSteps: number;
  readonly judgement: HistoryJudgement | null;
  readonly next: NextStep;
}

/** What happens to a run after a leg. */
export type NextStep =
  | { readonly kind: "continue" }
  | {
      readonly kind: "done";
      readonly verdict: Verdict;
      readonly reason: string;
      readonly stopCause: StopCause;
    }
  | {
      readonly kind: "next-attempt";
      readonly verdict: Verdict;
      readonly reason: string;
      readonly remedy: AppliedRemedy;
      /** The remedy's changes as canonical JSON: equal texts are the same attempt of the run. */
      readonly settings: string;
      readonly inputs: Readonly<Record<string, unknown>>;
    };
