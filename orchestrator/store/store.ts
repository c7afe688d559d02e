import type { CampaignState, CampaignSummary, RunDetail } from "./rows.ts";

/** What is remembered; the only way to the tables. */
export interface Store {
  /** Every campaign, newest first. */
  campaigns(): Promise<readonly CampaignSummary[]>;
  /** One campaign with its runs; NOT_FOUND names the nearest campaign. */
  campaignState(campaign: string): Promise<CampaignState>;
  /** One run with its attempts; the id may be shortened as long as it is unique. */
  runDetail(runId: string): Promise<RunDetail>;
  /** Asks a night that is going on for this campaign to stop; the campaign stays stopped until it is launched again. */
  markStop(campaign: string): Promise<void>;
}
