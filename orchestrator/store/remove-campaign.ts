import { AppError } from "../contract/index.ts";
import type { SqlQueryable } from "./sql-pool.ts";

/** What the removal of a campaign took away. */
export interface Removal {
  /** Runs whose histories are gone, since no other campaign asks for them. */
  readonly runsDeleted: number;
  /** Runs that other campaigns still ask for. */
  readonly runsKept: number;
  /** Files that nothing refers to any more, relative to the folder; to be deleted once this is committed. */
  readonly files: readonly string[];
}

/**
 * Takes a campaign out of the store, within the caller's transaction, and with it every run that no other campaign asks
 * for: attempts, legs, index of histories.
 *
 * @throws NOT_FOUND
 */
export async function removeCampaign(sql: SqlQueryable, campaign: string): Promise<Removal> {
  const { rows: runs } = await sql.query<{ run_id: string }>(
    "select run_id from midwatch.campaign_runs where campaign = $1",
    [campaign],
  );
  const gone = await sql.query("delete from midwatch.campaigns where campaign = $1 returning campaign", [
    campaign,
  ]);
  if (gone.rows.length === 0)
    throw new AppError("NOT_FOUND", `there is no campaign "${campaign}"`, {
      where: campaign,
      fix: "midwatch tell lists the campaigns there are.",
    });
  const ids = JSON.stringify(runs.map((row) => row.run_id));
  const { rows: orphans } = await sql.query<{ run_id: string }>(
    `select value as run_id from json_array_elements_text($1::json)
     where not exists (select 1 from midwatch.campaign_runs c where c.run_id = value)`,
    [ids],
  );
  const orphanIds = JSON.stringify(orphans.map((row) => row.run_id));
  const files = await filesOf(sql, orphanIds);
  for (const table of ["histories", "legs", "attempts", "runs"])
    await sql.query(
      `delete from midwatch.${table} where run_id in (select value from json_array_elements_text($1::json))`,
      [orphanIds],
    );
  return { runsDeleted: orphans.length, runsKept: runs.length - orphans.length, files };
}

async function filesOf(sql: SqlQueryable, runIds: string): Promise<string[]> {
  const { rows: histories } = await sql.query<{ file: string }>(
    "select file from midwatch.histories where run_id in (select value from json_array_elements_text($1::json))",
    [runIds],
  );
  const { rows: checkpoints } = await sql.query<{ checkpoint: string }>(
    `select checkpoint from midwatch.attempts
     where checkpoint is not null and run_id in (select value from json_array_elements_text($1::json))`,
    [runIds],
  );
  const saved = checkpoints.map((row) => (JSON.parse(row.checkpoint) as { file: string }).file);
  return [...histories.map((row) => row.file), ...saved];
}
