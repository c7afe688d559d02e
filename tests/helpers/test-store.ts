import { PGlite } from "@electric-sql/pglite";
import { migrate } from "../../orchestrator/store/migrate.ts";
import { PglitePool } from "../../orchestrator/store/pglite-pool.ts";
import { createSqlStore } from "../../orchestrator/store/sql-store.ts";
import type { Store } from "../../orchestrator/store/store.ts";

/** A store over a PGlite in memory. */
export async function testStore(): Promise<{ db: PGlite; pool: PglitePool; store: Store }> {
  const db = await PGlite.create();
  const pool = new PglitePool(db);
  await migrate(pool, 0);
  return { db, pool, store: createSqlStore(pool) };
}
