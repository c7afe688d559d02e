import type { HistoryPiece } from "../contract/index.ts";
import { type CampaignRunRow, SELECT_CAMPAIGN_RUN, toCampaignRun } from "./row-mapping.ts";
import type { SqlQueryable } from "./sql-pool.ts";
import type { LegClaim } from "./store.ts";

interface ClaimedRow {
  fence: number;
  inputs: string;
  checkpoint: string | null;
  ended_because: string | null;
  steps: number;
  seconds: number;
}

/** Pieces of an attempt's history, in order. */
export async function historyPieces(
  sql: SqlQueryable,
  runId: string,
  attempt: number,
): Promise<readonly HistoryPiece[]> {
  const { rows } = await sql.query<{ file: string; from_step: number; to_step: number }>(
    "select file, from_step, to_step from midwatch.histories where run_id = $1 and attempt = $2 order by from_step",
    [runId, attempt],
  );
  return rows.map((row) => ({ file: row.file, fromStep: row.from_step, toStep: row.to_step }));
}

/**
 * Takes a leg within the caller's transaction. Raising the fence shuts out whoever claimed the attempt before: the commit
 * of an older fence changes no row, and so writes nothing at all.
 */
export async function claimLeg(
  sql: SqlQueryable,
  ticket: { campaign: string; runId: string; attempt: number; legs: number },
): Promise<LegClaim | null> {
  const { campaign, runId, attempt, legs } = ticket;
  const claimed = await sql.query<ClaimedRow>(
    `update midwatch.attempts a set fence = a.fence + 1
     where a.run_id = $1 and a.attempt = $2 and exists (
       select 1 from midwatch.campaign_runs c
       where c.campaign = $3 and c.run_id = $1 and c.attempt = $2 and c.legs = $4 and c.state <> 'done')
     returning a.fence, a.inputs, a.checkpoint, a.ended_because, a.steps, a.seconds`,
    [runId, attempt, campaign, legs],
  );
  const row = claimed.rows[0];
  if (row === undefined) return null;
  await sql.query("update midwatch.campaign_runs set state = 'running' where campaign = $1 and run_id = $2", [
    campaign,
    runId,
  ]);
  const { rows } = await sql.query<CampaignRunRow & { solver: string }>(
    `${SELECT_CAMPAIGN_RUN} where c.campaign = $1 and c.run_id = $2`,
    [campaign, runId],
  );
  const { rows: solvers } = await sql.query<{ solver: string }>(
    "select solver from midwatch.runs where run_id = $1",
    [runId],
  );
  return {
    campaign,
    run: toCampaignRun(rows[0]!),
    attempt,
    fence: row.fence,
    inputs: JSON.parse(row.inputs),
    solver: solvers[0]!.solver,
    history: await historyPieces(sql, runId, attempt),
    checkpoint: row.checkpoint === null ? null : JSON.parse(row.checkpoint),
    judgedSteps: rows[0]!.judged_steps,
    endedBecause: row.ended_because,
    attemptSteps: row.steps,
    attemptSeconds: row.seconds,
  };
}
