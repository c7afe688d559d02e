import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { migrate } from "../../orchestrator/store/migrate.ts";
import { inTransaction } from "../../orchestrator/store/sql-pool.ts";
import { testStore } from "../helpers/test-store.ts";

describe("the pool in front of the in-process database", () => {
  let made: Awaited<ReturnType<typeof testStore>>;
  beforeAll(async () => {
    made = await testStore();
    await made.pool.query("create table public.t (a int); insert into public.t values (1), (2)");
  });
  afterAll(() => made.db.close());

  it("counts rows returned and rows changed", async () => {
    const { pool } = made;
    expect(await pool.query("select a from public.t order by a")).toEqual({
      rows: [{ a: 1 }, { a: 2 }],
      rowCount: 2,
    });
    expect((await pool.query("update public.t set a = a where a > $1", [0])).rowCount).toBe(2);
    expect((await pool.query("update public.t set a = a where a > $1", [9])).rowCount).toBe(0);
    expect((await pool.query("select 1 where false")).rowCount).toBe(0);
  });

  it("lets no other query join a transaction, and rolls it back whole", async () => {
    const { pool } = made;
    const order: string[] = [];
    const failing = inTransaction(pool, async (sql) => {
      await sql.query("insert into public.t values (3)");
      order.push("inserted");
      await new Promise((resolve) => setTimeout(resolve, 50));
      order.push("failing");
      throw new Error("on purpose");
    });
    const beside = pool.query("select count(*)::int as n from public.t").then((result) => {
      order.push("read");
      return result.rows[0];
    });
    await expect(failing).rejects.toThrow("on purpose");
    expect(await beside).toEqual({ n: 2 });
    expect(order).toEqual(["inserted", "failing", "read"]);
  });

  it("gives the session back when a client leaves a transaction open", async () => {
    const client = await made.pool.connect();
    await client.query("BEGIN");
    await client.query("delete from public.t");
    client.release();
    expect((await made.pool.query("select a from public.t")).rowCount).toBe(2);
  });

  it("hands a notification to every client that listens, and to none that left", async () => {
    const { pool } = made;
    const heard: string[] = [];
    const [one, two] = [await pool.connect(), await pool.connect()];
    one.on("notification", (message) => heard.push(`one ${message.payload}`));
    two.on("notification", (message) => heard.push(`two ${message.payload}`));
    await one.query("-- why\nLISTEN news");
    await two.query('LISTEN "news"');
    await pool.query("select pg_notify('news', 'a')");
    one.release();
    await pool.query("select pg_notify('news', 'b')");
    expect(heard.sort()).toEqual(["one a", "two a", "two b"]);
    two.release();
  });

  it("lets timers in while queries follow each other without a pause", async () => {
    let ticks = 0;
    const timer = setInterval(() => {
      ticks += 1;
    }, 5);
    const until = performance.now() + 400;
    while (performance.now() < until) await made.pool.query("select 1");
    clearInterval(timer);
    expect(ticks).toBeGreaterThan(5);
  });

  it("keeps the write-ahead log short", async () => {
    const { pool } = made;
    const size = async () =>
      (await pool.query<{ mb: number }>("select sum(size)::float8 / 1048576 as mb from pg_ls_waldir()"))
        .rows[0]!.mb;
    await pool.query("create table public.bulk (x text)");
    for (let i = 0; i < 500; i++)
      await pool.query(
        "insert into public.bulk select string_agg(md5(random()::text), '') from generate_series(1, $1)",
        [8000],
      );
    await pool.end();
    const { rows } = await pool.query<{ mb: number }>(
      "select pg_wal_lsn_diff(pg_current_wal_insert_lsn(), '0/0')::float8 / 1048576 as mb",
    );
    expect(rows[0]!.mb).toBeGreaterThan(120);
    expect(await size()).toBeLessThan(120);
  }, 60_000);

  it("migrates once, and refuses tables of a newer version", async () => {
    const { pool } = made;
    await migrate(pool, 1);
    const { rows } = await pool.query("select number, applied_ms from midwatch.migrations");
    expect(rows).toEqual([{ number: 1, applied_ms: 0 }]);
    await pool.query("insert into midwatch.migrations values (99, 'from the future', 0)");
    await expect(migrate(pool, 2)).rejects.toMatchObject({ code: "STATE_CONFLICT" });
  });
});
