import { AppError } from "../contract/index.ts";
import { SCHEMA_0001 } from "./schema-0001.ts";
import { inTransaction, type SqlPool } from "./sql-pool.ts";

/** Every change of the tables, in order; numbers count from 1. Append only. */
const MIGRATIONS: readonly { readonly name: string; readonly sql: string }[] = [
  { name: "first tables", sql: SCHEMA_0001 },
];

/**
 * Brings the tables up to date, all or nothing.
 *
 * @throws STATE_CONFLICT when a newer version of midwatch has been here
 */
export async function migrate(pool: SqlPool, nowMs: number): Promise<void> {
  await inTransaction(pool, async (sql) => {
    await sql.query("create schema if not exists midwatch");
    await sql.query(
      "create table if not exists midwatch.migrations (number int primary key, name text not null, applied_ms float8 not null)",
    );
    const { rows } = await sql.query<{ newest: number }>(
      "select coalesce(max(number), 0)::int as newest from midwatch.migrations",
    );
    const newest = rows[0]!.newest;
    if (newest > MIGRATIONS.length)
      throw new AppError(
        "STATE_CONFLICT",
        `the data folder was used by a newer midwatch (tables ${newest})`,
        {
          where: "midwatch.migrations",
          fix: `This version knows tables up to ${MIGRATIONS.length}: upgrade midwatch, or name another folder with --data.`,
        },
      );
    for (const [index, { name, sql: change }] of MIGRATIONS.entries()) {
      if (index < newest) continue;
      await sql.query(change);
      await sql.query("insert into midwatch.migrations (number, name, applied_ms) values ($1, $2, $3)", [
        index + 1,
        name,
        nowMs,
      ]);
    }
  });
}
