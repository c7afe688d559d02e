import { EventEmitter } from "node:events";
import type { PGlite, Results, Transaction } from "@electric-sql/pglite";
import { createBreath } from "./breath.ts";
import type { SqlClient, SqlNotification, SqlPool, SqlResult } from "./sql-pool.ts";

/** Longest stretch of queries without letting the event loop turn. */
const BREATH_MS = 4;
/** Queries between two looks at how much log has been written. */
const QUERIES_PER_LOOK = 100;
/** Bytes of write-ahead log after which a checkpoint is due: without one it grows without bound. */
const CHECKPOINT_BYTES = 64 * 2 ** 20;

type Answer = <R>(text: string, params?: readonly unknown[]) => Promise<SqlResult<R>>;

/**
 * A pool in front of one in-process PGlite, which has a single session. Clients are views of it: a transaction holds
 * PGlite's own mutex from BEGIN to the end, so that no other query joins it, and LISTEN is fanned out to the clients
 * that asked.
 */
export class PglitePool extends EventEmitter implements SqlPool {
  readonly options = { keepAlive: true };
  readonly #db: PGlite;
  readonly #breathe = createBreath(BREATH_MS);
  #queries = 0;
  #checkpointAt: string | null = null;
  #upkeep: Promise<void> | null = null;

  constructor(db: PGlite) {
    super();
    // Every queue and worker listens for errors of the pool, and does so as long as the pool lives.
    this.setMaxListeners(0);
    this.#db = db;
  }

  readonly query: Answer = async <R>(text: string, params?: readonly unknown[]) => {
    await this.#breathe();
    const result = await answer<R>(this.#db, text, params);
    this.#keepLogShort();
    return result;
  };

  async connect(): Promise<SqlClient> {
    const client = new PgliteClient(this.#db, this);
    this.emit("connect", client);
    return client;
  }

  /** Waits for a checkpoint that is under way. PGlite itself is closed by whoever opened it. */
  async end(): Promise<void> {
    await this.#upkeep;
  }

  async breathe(): Promise<void> {
    await this.#breathe();
  }

  #keepLogShort(): void {
    this.#queries += 1;
    if (this.#queries % QUERIES_PER_LOOK !== 0 || this.#upkeep !== null) return;
    this.#upkeep = this.#checkpointWhenDue()
      .catch((error: unknown) => void this.emit("error", error))
      .finally(() => {
        this.#upkeep = null;
      });
  }

  async #checkpointWhenDue(): Promise<void> {
    const since = this.#checkpointAt ?? "0/0";
    const { rows } = await this.#db.query<{ at: string; bytes: number }>(
      "select pg_current_wal_insert_lsn()::text as at, " +
        "pg_wal_lsn_diff(pg_current_wal_insert_lsn(), $1::pg_lsn)::float8 as bytes",
      [since],
    );
    const row = rows[0]!;
    if (this.#checkpointAt !== null && row.bytes < CHECKPOINT_BYTES) return;
    if (this.#checkpointAt !== null) await this.#db.exec("checkpoint");
    this.#checkpointAt = row.at;
  }
}

/** Runs SQL: the simple protocol where there are no parameters, since it alone takes several statements. */
async function answer<R>(
  on: PGlite | Transaction,
  text: string,
  params: readonly unknown[] | undefined,
): Promise<SqlResult<R>> {
  if (params !== undefined && params.length > 0)
    return asResult(await on.query<R>(text, params as unknown[]));
  const results = await on.exec(text);
  return asResult((results.at(-1) ?? { rows: [], fields: [] }) as Results<R>);
}

function asResult<R>(result: Results<R>): SqlResult<R> {
  const rows = result.rows as R[];
  return { rows, rowCount: rows.length > 0 ? rows.length : (result.affectedRows ?? 0) };
}

const VERB =
  /^(?:\s|--[^\n]*\n|\/\*[\s\S]*?\*\/)*(BEGIN|START\s+TRANSACTION|COMMIT|END|ROLLBACK|LISTEN|UNLISTEN)\b\s*("?[\w$*]*"?)/i;

/** One client: the shared session, a transaction while one is open, and its own LISTENs. */
class PgliteClient extends EventEmitter implements SqlClient {
  readonly #db: PGlite;
  readonly #pool: PglitePool;
  readonly #listens = new Map<string, () => Promise<void>>();
  #transaction: OpenTransaction | null = null;

  constructor(db: PGlite, pool: PglitePool) {
    super();
    this.#db = db;
    this.#pool = pool;
  }

  readonly query: Answer = async <R>(text: string, params?: readonly unknown[]) => {
    const [, verb = "", name = ""] = VERB.exec(text) ?? [];
    switch (verb.toUpperCase().replace(/\s+/g, " ")) {
      case "BEGIN":
      case "START TRANSACTION":
        return this.#begin<R>();
      case "COMMIT":
      case "END":
        return this.#end<R>("commit");
      case "ROLLBACK":
        // ROLLBACK TO a savepoint ends nothing.
        return /^to$/i.test(name) ? this.#answer<R>(text, params) : this.#end<R>("rollback");
      case "LISTEN":
        return this.#listen<R>(name.replaceAll('"', ""));
      case "UNLISTEN":
        return this.#unlisten<R>(name.replaceAll('"', ""));
      default:
        return this.#answer<R>(text, params);
    }
  };

  release(): void {
    // A transaction left open would hold the only session for ever.
    if (this.#transaction !== null) this.#end("rollback").catch((error: unknown) => this.#tell(error));
    this.#unlisten("*").catch((error: unknown) => this.#tell(error));
    this.emit("end");
  }

  #tell(error: unknown): void {
    if (this.listenerCount("error") > 0) this.emit("error", error);
  }

  async #answer<R>(text: string, params: readonly unknown[] | undefined): Promise<SqlResult<R>> {
    if (this.#transaction === null) return this.#pool.query<R>(text, params);
    await this.#pool.breathe();
    return answer<R>(this.#transaction.sql, text, params);
  }

  async #begin<R>(): Promise<SqlResult<R>> {
    if (this.#transaction !== null) throw new Error("a transaction is already open on this client");
    this.#transaction = await openTransaction(this.#db);
    return { rows: [], rowCount: 0 };
  }

  async #end<R>(how: "commit" | "rollback"): Promise<SqlResult<R>> {
    const transaction = this.#transaction;
    this.#transaction = null;
    if (transaction !== null) await transaction.end(how);
    return { rows: [], rowCount: 0 };
  }

  async #listen<R>(channel: string): Promise<SqlResult<R>> {
    if (!this.#listens.has(channel)) {
      // Set before the answer is awaited, so that two callers do not both listen.
      this.#listens.set(channel, async () => undefined);
      const stop = await this.#db.listen(channel, (payload) => {
        const message: SqlNotification = { channel, payload };
        this.emit("notification", message);
      });
      this.#listens.set(channel, () => stop());
    }
    return { rows: [], rowCount: 0 };
  }

  async #unlisten<R>(channel: string): Promise<SqlResult<R>> {
    const gone = channel === "*" ? [...this.#listens.keys()] : [channel];
    for (const name of gone) {
      const stop = this.#listens.get(name);
      this.#listens.delete(name);
      if (!this.#db.closed) await stop?.();
    }
    return { rows: [], rowCount: 0 };
  }
}

interface OpenTransaction {
  readonly sql: Transaction;
  end(how: "commit" | "rollback"): Promise<void>;
}

/** Opens a transaction that stays open until it is told how to end: PGlite's own form wants it inside one callback. */
async function openTransaction(db: PGlite): Promise<OpenTransaction> {
  return new Promise<OpenTransaction>((resolve, reject) => {
    let finish: (how: "commit" | "rollback") => void = () => undefined;
    const ending = new Promise<"commit" | "rollback">((settle) => {
      finish = settle;
    });
    const whole = db.transaction(async (sql) => {
      resolve({
        sql,
        end: async (how) => {
          finish(how);
          await whole;
        },
      });
      if ((await ending) === "rollback") await sql.rollback();
    });
    // Before `resolve`, a failure is one of BEGIN; after it, `end` hears of it.
    whole.catch(reject);
  });
}
