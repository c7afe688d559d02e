import type { Plan, PlannedRun } from "../contract/index.ts";
import { planText } from "./row-mapping.ts";
import type { SqlQueryable } from "./sql-pool.ts";
import type { Registration } from "./store.ts";

/** Runs written by one statement. */
const BATCH = 500;

interface Entry {
  readonly run: PlannedRun;
  readonly place: number;
  readonly rules: string;
}

/**
 * Puts a campaign into the store or brings it up to date, within the caller's transaction. A run whose rules are unchanged
 * keeps its verdict; one with other rules is judged anew from its stored history; one that is no longer asked for leaves
 * the campaign, while its history stays for whoever asks for the same case.
 */
export async function registerCampaign(
  sql: SqlQueryable,
  plan: Plan,
  rulesOf: (run: PlannedRun) => string,
  nowMs: number,
): Promise<Registration> {
  const { rows: before } = await sql.query<{ run_id: string; rules: string }>(
    "select run_id, rules from midwatch.campaign_runs where campaign = $1",
    [plan.campaign],
  );
  const inserted = await sql.query<{ campaign: string }>(
    `insert into midwatch.campaigns (campaign, title, plan, standing, created_ms) values ($1, $2, $3, 'ready', $4)
     on conflict (campaign) do nothing returning campaign`,
    [plan.campaign, plan.title, planText(plan), nowMs],
  );
  if (inserted.rows.length === 0)
    await sql.query("update midwatch.campaigns set title = $2, plan = $3 where campaign = $1", [
      plan.campaign,
      plan.title,
      planText(plan),
    ]);
  const places = new Map(plan.order.map((runId, place) => [runId, place]));
  const entries = plan.runs.map((run) => ({
    run,
    place: places.get(run.runId) ?? plan.order.length + run.number,
    rules: rulesOf(run),
  }));
  const rulesBefore = new Map(before.map((row) => [row.run_id, row.rules]));
  const changed = entries.filter((e) => (rulesBefore.get(e.run.runId) ?? e.rules) !== e.rules);
  const wanted = new Set(plan.runs.map((run) => run.runId));
  const dropped = before.map((row) => row.run_id).filter((id) => !wanted.has(id));
  // Runs with other rules leave and come back new, and so do their verdicts.
  await remove(sql, plan.campaign, [...dropped, ...changed.map((e) => e.run.runId)]);
  for (let i = 0; i < entries.length; i += BATCH)
    await insertRuns(sql, plan, entries.slice(i, i + BATCH), nowMs);
  return {
    isNew: inserted.rows.length > 0,
    added: entries.filter((e) => !rulesBefore.has(e.run.runId)).length,
    rejudged: changed.length,
    dropped: dropped.length,
  };
}

async function remove(sql: SqlQueryable, campaign: string, runIds: readonly string[]): Promise<void> {
  await sql.query(
    `delete from midwatch.campaign_runs where campaign = $1
     and run_id in (select value from json_array_elements_text($2::json))`,
    [campaign, JSON.stringify(runIds)],
  );
}

async function insertRuns(
  sql: SqlQueryable,
  plan: Plan,
  entries: readonly Entry[],
  nowMs: number,
): Promise<void> {
  const json = JSON.stringify(
    entries.map(({ run, place, rules }) => ({
      run_id: run.runId,
      inputs: JSON.stringify(run.inputs),
      number: run.number,
      place,
      role: run.role,
      label: run.label,
      planned: JSON.stringify({ ...run, inputs: undefined }),
      rules,
      longest_steps: run.longestSteps,
    })),
  );
  const from = `json_to_recordset($1::json) as e(run_id text, inputs text, number int, place int, role text,
    label text, planned text, rules text, longest_steps int)`;
  await sql.query(
    `insert into midwatch.runs (run_id, solver, model_version, inputs, created_ms)
     select e.run_id, $2, $3, e.inputs, $4::float8 from ${from} on conflict (run_id) do nothing`,
    [json, plan.solver, plan.modelVersion, nowMs],
  );
  await sql.query(
    `insert into midwatch.attempts (run_id, attempt, settings, inputs)
     select e.run_id, 1, '{}', e.inputs from ${from} on conflict (run_id, attempt) do nothing`,
    [json],
  );
  await sql.query(
    `insert into midwatch.campaign_runs
       (campaign, run_id, number, place, role, label, planned, rules, attempt, longest_steps)
     select $2, e.run_id, e.number, e.place, e.role, e.label, e.planned, e.rules, 1, e.longest_steps from ${from}
     on conflict (campaign, run_id) do update set number = excluded.number, place = excluded.place,
       role = excluded.role, label = excluded.label, planned = excluded.planned`,
    [json, plan.campaign],
  );
}
