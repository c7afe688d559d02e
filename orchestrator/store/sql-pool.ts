/** Rows of a query; `rowCount` counts rows returned, or rows changed where none are returned. */
export interface SqlResult<R> {
  readonly rows: R[];
  readonly rowCount: number | null;
}

/** Something that answers SQL, with `$1` placeholders. */
export interface SqlQueryable {
  // biome-ignore lint/suspicious/noExplicitAny: the caller names the row; the shape matches the drivers' own.
  query<R = any>(text: string, params?: readonly unknown[]): Promise<SqlResult<R>>;
}

/** A notification on a channel that a client listens on. */
export interface SqlNotification {
  readonly channel: string;
  readonly payload?: string;
}

/** One session checked out of a pool: transactions and LISTEN live on it. */
export interface SqlClient extends SqlQueryable {
  on(event: "notification", listener: (message: SqlNotification) => void): this;
  on(event: "error", listener: (error: Error) => void): this;
  on(event: "end", listener: () => void): this;
  removeListener(event: "notification", listener: (message: SqlNotification) => void): this;
  removeAllListeners(event?: string): this;
  release(destroy?: boolean): void;
}

/** A pool of sessions: in-process PGlite here, node-postgres's pool where a server is used. */
export interface SqlPool extends SqlQueryable {
  readonly options?: { readonly keepAlive?: boolean };
  connect(): Promise<SqlClient>;
  end(): Promise<void>;
  on(event: "error", listener: (error: Error) => void): this;
  on(event: "connect", listener: (client: SqlClient) => void): this;
  removeAllListeners(event?: string): this;
}

/** Runs `work` in one transaction on a session of its own; any error rolls it back and is passed on. */
export async function inTransaction<T>(pool: SqlPool, work: (sql: SqlQueryable) => Promise<T>): Promise<T> {
  const client = await pool.connect();
  try {
    await client.query("BEGIN");
    const value = await work(client);
    await client.query("COMMIT");
    return value;
  } catch (error) {
    // The first error is the one to tell; a session that cannot roll back is destroyed below.
    await client.query("ROLLBACK").catch(() => undefined);
    throw error;
  } finally {
    client.release();
  }
}
