import type { Plan } from "../contract/index.ts";
import { campaignRun, campaignState, campaigns, runDetail } from "./campaign-queries.ts";
import { claimLeg, historyPieces } from "./claim-leg.ts";
import { commitLeg, StaleFence } from "./commit-leg.ts";
import { registerCampaign } from "./register-campaign.ts";
import { removeCampaign } from "./remove-campaign.ts";
import type { CampaignStanding } from "./rows.ts";
import { rulesText } from "./rules-text.ts";
import { inTransaction, type SqlPool } from "./sql-pool.ts";
import type { LegCommit, Store } from "./store.ts";

/** The store over a pool of PostgreSQL sessions, in-process or not: the SQL is the same. */
export function createSqlStore(pool: SqlPool): Store {
  const setStanding = async (campaign: string, standing: CampaignStanding, deadlineMs?: number | null) => {
    await pool.query(
      `update midwatch.campaigns set standing = $2, deadline_ms = case when $3 then $4::float8 else deadline_ms end
       where campaign = $1`,
      [campaign, standing, deadlineMs !== undefined, deadlineMs ?? null],
    );
  };
  return {
    campaigns: () => campaigns(pool),
    campaignState: (campaign) => campaignState(pool, campaign),
    campaignRun: (campaign, runId) => campaignRun(pool, campaign, runId),
    runDetail: (runId) => runDetail(pool, runId),
    historyPieces: (runId, attempt) => historyPieces(pool, runId, attempt),
    files: () => files(pool),
    register: (plan: Plan, nowMs) =>
      inTransaction(pool, (sql) => registerCampaign(sql, plan, (run) => rulesText(plan, run), nowMs)),
    setStanding,
    markStop: async (campaign) => {
      await campaignState(pool, campaign);
      await setStanding(campaign, "stopped");
    },
    remove: (campaign) => inTransaction(pool, (sql) => removeCampaign(sql, campaign)),
    claim: (campaign, runId, attempt, legs) =>
      inTransaction(pool, (sql) => claimLeg(sql, { campaign, runId, attempt, legs })),
    commit: (leg) => commit(pool, leg),
    countDeath: async (campaign, runId) => {
      const { rows } = await pool.query<{ deaths: number }>(
        "update midwatch.campaign_runs set deaths = deaths + 1 where campaign = $1 and run_id = $2 returning deaths",
        [campaign, runId],
      );
      return rows[0]?.deaths ?? 0;
    },
  };
}

async function commit(pool: SqlPool, leg: LegCommit): Promise<"committed" | "stale"> {
  try {
    await inTransaction(pool, (sql) => commitLeg(sql, leg));
    return "committed";
  } catch (error) {
    if (error instanceof StaleFence) return "stale";
    throw error;
  }
}

async function files(pool: SqlPool): Promise<ReadonlySet<string>> {
  const { rows: histories } = await pool.query<{ file: string }>("select file from midwatch.histories");
  const { rows: checkpoints } = await pool.query<{ checkpoint: string }>(
    "select checkpoint from midwatch.attempts where checkpoint is not null",
  );
  const saved = checkpoints.map((row) => (JSON.parse(row.checkpoint) as { file: string }).file);
  return new Set([...histories.map((row) => row.file), ...saved]);
}
