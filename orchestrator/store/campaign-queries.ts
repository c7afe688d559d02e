import { AppError } from "../contract/index.ts";
import {
  type AttemptRow,
  type CampaignRow,
  type CampaignRunRow,
  type PastAttemptRow,
  SELECT_CAMPAIGN_RUN,
  toAttempt,
  toCampaignRun,
  toCampaignSummary,
  toPastAttempt,
  toPlan,
  type VerdictCountRow,
} from "./row-mapping.ts";
import type { CampaignRun, CampaignState, CampaignSummary, RunDetail } from "./rows.ts";
import type { SqlQueryable } from "./sql-pool.ts";

const COUNTS = `
  select campaign, verdict, count(*)::int as runs, count(*) filter (where state = 'done')::int as done,
    sum(seconds)::float8 as seconds
  from midwatch.campaign_runs group by campaign, verdict`;

const CAMPAIGN = "select campaign, title, plan, standing, created_ms, deadline_ms from midwatch.campaigns";

/** Every campaign, newest first. */
export async function campaigns(sql: SqlQueryable): Promise<readonly CampaignSummary[]> {
  const { rows } = await sql.query<CampaignRow>(`${CAMPAIGN} order by created_ms desc, campaign`);
  const { rows: counts } = await sql.query<VerdictCountRow>(COUNTS);
  return rows.map((row) => toCampaignSummary(row, counts));
}

/**
 * One campaign with its runs in the listing's order.
 *
 * @throws NOT_FOUND naming the campaigns there are
 */
export async function campaignState(sql: SqlQueryable, campaign: string): Promise<CampaignState> {
  const { rows } = await sql.query<CampaignRow>(`${CAMPAIGN} where campaign = $1`, [campaign]);
  const row = rows[0];
  if (row === undefined) throw await noSuchCampaign(sql, campaign);
  const { rows: counts } = await sql.query<VerdictCountRow>(COUNTS);
  const { rows: runRows } = await sql.query<CampaignRunRow>(
    `${SELECT_CAMPAIGN_RUN} where c.campaign = $1 order by c.number`,
    [campaign],
  );
  const list = runRows.map(toCampaignRun);
  return { ...toCampaignSummary(row, counts), plan: toPlan(row.plan, list), list };
}

/** One run as one campaign sees it now. */
export async function campaignRun(sql: SqlQueryable, campaign: string, runId: string): Promise<CampaignRun> {
  const { rows } = await sql.query<CampaignRunRow>(
    `${SELECT_CAMPAIGN_RUN} where c.campaign = $1 and c.run_id = $2`,
    [campaign, runId],
  );
  if (rows[0] === undefined) throw noSuchRun(runId, []);
  return toCampaignRun(rows[0]);
}

/**
 * One run with its attempts and the campaigns that asked for it.
 *
 * @throws NOT_FOUND for an unknown id and for a shortened one that fits several
 */
export async function runDetail(sql: SqlQueryable, given: string): Promise<RunDetail> {
  const { rows } = await sql.query<{ run_id: string; solver: string; model_version: string; inputs: string }>(
    "select run_id, solver, model_version, inputs from midwatch.runs where starts_with(run_id, $1) order by run_id limit 6",
    [given],
  );
  const run = rows.find((row) => row.run_id === given) ?? (rows.length === 1 ? rows[0] : undefined);
  if (run === undefined || given === "")
    throw noSuchRun(given, given === "" ? [] : rows.map((r) => r.run_id));
  const { rows: attempts } = await sql.query<AttemptRow>(
    `select attempt, settings, steps, seconds, ended_because, output, channels, periods, dt_seconds, legs
     from midwatch.attempts where run_id = $1 order by attempt`,
    [run.run_id],
  );
  const { rows: seen } = await sql.query<CampaignRunRow>(
    `${SELECT_CAMPAIGN_RUN} where c.run_id = $1 order by c.campaign`,
    [run.run_id],
  );
  const { rows: past } = await sql.query<PastAttemptRow>(
    `select campaign, attempt, remedy, verdict, reason, steps, judgement
     from midwatch.past_attempts where run_id = $1 order by attempt`,
    [run.run_id],
  );
  return {
    runId: run.run_id,
    solver: run.solver,
    modelVersion: run.model_version,
    inputs: JSON.parse(run.inputs),
    attempts: attempts.map(toAttempt),
    campaigns: seen.map((row) => ({
      ...toCampaignRun(row),
      past: past.filter((p) => p.campaign === row.campaign).map(toPastAttempt),
    })),
  };
}

async function noSuchCampaign(sql: SqlQueryable, campaign: string): Promise<AppError> {
  const { rows } = await sql.query<{ campaign: string }>(
    "select campaign from midwatch.campaigns order by created_ms desc limit 8",
  );
  const known = rows.map((row) => row.campaign).join(", ");
  return new AppError("NOT_FOUND", `there is no campaign "${campaign}" in this data folder`, {
    where: campaign,
    fix:
      known === "" ? "Nothing was launched here yet; is it the right --data folder?" : `There are: ${known}.`,
  });
}

function noSuchRun(given: string, fitting: readonly string[]): AppError {
  if (fitting.length === 0)
    return new AppError("NOT_FOUND", `there is no run "${given}" in this data folder`, {
      where: given,
      fix: "midwatch tell CAMPAIGN lists the runs with their ids.",
    });
  return new AppError("NOT_FOUND", `"${given}" is the beginning of several run ids`, {
    where: given,
    fix: `Give more of it: ${fitting.join(", ")}.`,
  });
}
