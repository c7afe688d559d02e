import type { SqlQueryable } from "./sql-pool.ts";
import type { LegCommit, NextStep } from "./store.ts";

/** Thrown inside the transaction to undo it: somebody else has claimed the attempt since. */
export class StaleFence extends Error {}

/**
 * Writes all that a leg did, within the caller's transaction. The first statement changes one row only for the newest
 * claim; without that row nothing is written.
 *
 * @throws StaleFence
 */
export async function commitLeg(sql: SqlQueryable, leg: LegCommit): Promise<void> {
  await writeAttempt(sql, leg);
  if (leg.computed?.history != null) {
    const { file, fromStep, toStep, bytes } = leg.computed.history;
    await sql.query(
      "insert into midwatch.histories (run_id, attempt, from_step, to_step, file, bytes) values ($1, $2, $3, $4, $5, $6)",
      [leg.runId, leg.attempt, fromStep, toStep, file, bytes],
    );
  }
  await sql.query(
    `insert into midwatch.legs (run_id, attempt, fence, campaign, from_step, to_step, seconds, outcome, committed_ms)
     values ($1, $2, $3, $4, $5, $6, $7, $8, $9)`,
    [
      leg.runId,
      leg.attempt,
      leg.fence,
      leg.campaign,
      leg.fromStep,
      leg.computed?.steps ?? leg.fromStep,
      leg.seconds,
      leg.outcome,
      leg.nowMs,
    ],
  );
  await writeCampaignRun(sql, leg);
  if (leg.next.kind === "next-attempt") await goOnWithRemedy(sql, leg, leg.next);
}

async function writeAttempt(sql: SqlQueryable, leg: LegCommit): Promise<void> {
  const { computed, ended } = leg;
  const updated = await sql.query(
    `update midwatch.attempts set legs = legs + 1, seconds = seconds + $4,
       steps = coalesce($5, steps), checkpoint = coalesce($6, checkpoint), channels = coalesce($7, channels),
       periods = coalesce($8, periods), dt_seconds = coalesce($9, dt_seconds),
       ended_because = coalesce(ended_because, $10), output = coalesce($11, output)
     where run_id = $1 and attempt = $2 and fence = $3`,
    [
      leg.runId,
      leg.attempt,
      leg.fence,
      leg.seconds,
      computed?.steps ?? null,
      computed?.checkpoint == null ? null : JSON.stringify(computed.checkpoint),
      computed === null ? null : JSON.stringify(computed.channels),
      computed === null ? null : JSON.stringify(computed.periods),
      computed?.dtSeconds ?? null,
      ended?.because ?? null,
      ended === null ? null : JSON.stringify(ended.output),
    ],
  );
  if (updated.rowCount !== 1) throw new StaleFence();
}

async function writeCampaignRun(sql: SqlQueryable, leg: LegCommit): Promise<void> {
  const done = leg.next.kind === "done" ? leg.next : null;
  const updated = await sql.query(
    `update midwatch.campaign_runs set state = $4, legs = legs + 1, deaths = 0, judged_steps = $5, steps = $6,
       longest_steps = $7, seconds = seconds + $8, judgement = coalesce($9, judgement), verdict = $10, reason = $11,
       stop_cause = $12
     where campaign = $1 and run_id = $2 and attempt = $3 and state <> 'done'`,
    [
      leg.campaign,
      leg.runId,
      leg.attempt,
      done === null ? "running" : "done",
      leg.judgedSteps,
      leg.steps,
      leg.longestSteps,
      leg.seconds,
      leg.judgement === null ? null : JSON.stringify(leg.judgement),
      done?.verdict ?? null,
      done?.reason ?? null,
      done?.stopCause ?? null,
    ],
  );
  if (updated.rowCount !== 1) throw new StaleFence();
}

/** Keeps what became of the attempt and turns to one with the remedy's settings, which another campaign may have begun. */
async function goOnWithRemedy(
  sql: SqlQueryable,
  leg: LegCommit,
  next: Extract<NextStep, { kind: "next-attempt" }>,
): Promise<void> {
  await sql.query(
    `insert into midwatch.past_attempts (campaign, run_id, attempt, remedy, verdict, reason, steps, judgement)
     select campaign, run_id, attempt, remedy, $3, $4, steps, judgement from midwatch.campaign_runs
     where campaign = $1 and run_id = $2`,
    [leg.campaign, leg.runId, next.verdict, next.reason],
  );
  const settings = next.settings;
  await sql.query(
    `insert into midwatch.attempts (run_id, attempt, settings, inputs)
     select $1, max(attempt) + 1, $2, $3 from midwatch.attempts where run_id = $1
     on conflict (run_id, settings) do nothing`,
    [leg.runId, settings, JSON.stringify(next.inputs)],
  );
  await sql.query(
    `update midwatch.campaign_runs set remedy = $4, judged_steps = 0, steps = 0, judgement = null, state = 'running',
       attempt = (select attempt from midwatch.attempts where run_id = $2 and settings = $3)
     where campaign = $1 and run_id = $2`,
    [leg.campaign, leg.runId, settings, JSON.stringify(next.remedy)],
  );
}
