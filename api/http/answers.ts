import type { LoadRow } from "../../orchestrator/night/index.ts";
import type { CampaignState, CampaignSummary, RunDetail } from "../../orchestrator/store/rows.ts";
import type { LiveNight } from "./live-night.ts";

/** Which part of a run's history, and how it is written. */
interface HistoryRequest {
  /** The last attempt where none is named. */
  readonly attempt: number | null;
  /** All channels where none is named. */
  readonly channel: readonly string[];
  readonly format: "csv" | "json";
}

/**
 * What can be asked about a data folder. Answered by the process that holds the folder, either directly or to others
 * over HTTP; both give the same answers, so that a command need not know which it talks to.
 */
export interface Answers {
  /** Every campaign, newest first. */
  campaigns(): Promise<readonly CampaignSummary[]>;
  /** One campaign with its runs. @throws NOT_FOUND */
  campaignState(campaign: string): Promise<CampaignState>;
  /** The night that is going on; null where none is. */
  liveNight(): Promise<LiveNight | null>;
  /** Loads of one campaign, or of all of them, in the order of the campaign files. @throws NOT_FOUND */
  loads(campaign: string | null): Promise<readonly LoadRow[]>;
  /** A run with its attempts; the id may be shortened. @throws NOT_FOUND */
  runDetail(runId: string): Promise<RunDetail>;
  /** A run's history as text, piece by piece. @throws NOT_FOUND, HISTORY_DAMAGED */
  history(runId: string, request: HistoryRequest): Promise<AsyncIterable<string>>;
  /** Stops a campaign; it stays stopped until it is launched again. @throws NOT_FOUND */
  stop(campaign: string): Promise<void>;
  /** Forgets a campaign and deletes what only it asked for. @throws NOT_FOUND, STATE_CONFLICT while it is computed */
  remove(campaign: string): Promise<{ readonly runsDeleted: number; readonly runsKept: number }>;
  close(): Promise<void>;
}
