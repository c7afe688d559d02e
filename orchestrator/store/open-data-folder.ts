import { existsSync, mkdirSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { join, posix, resolve } from "node:path";
import { PGlite } from "@electric-sql/pglite";
import { AppError } from "../contract/index.ts";
import { createLegQueue } from "../queue/create-leg-queue.ts";
import type { LegQueue } from "../queue/leg-queue.ts";
import type { DataFolder } from "./data-folder.ts";
import { diskFull, freeBytes, isDiskFull } from "./disk-full.ts";
import { lockFolder } from "./folder-lock.ts";
import { migrate } from "./migrate.ts";
import { PglitePool } from "./pglite-pool.ts";
import { createSqlStore } from "./sql-store.ts";
import type { Store } from "./store.ts";

/** A fresh database takes about 40 MB; less than this and it would end half-made. */
const ROOM_FOR_A_DATABASE = 96 * 2 ** 20;
/** Below this much room an existing database is not opened, since its first writes may already fail. */
const ROOM_TO_OPEN = 24 * 2 ** 20;

/** Its presence says that the database was made to the end. */
const WHOLE = "database-is-whole";

/** What may be said while a folder is opened, and the clock. */
export interface OpenOptions {
  /** Called before and after what takes seconds. */
  readonly onNotice: (words: string) => void;
  readonly now: () => number;
}

/**
 * Opens a data folder for this process alone, and makes it where there is none.
 *
 * @throws DATA_FOLDER_BUSY, DISK_FULL, USAGE where the folder cannot be written, STATE_CONFLICT from a newer midwatch
 */
export async function openDataFolder(given: string, options: OpenOptions): Promise<DataFolder> {
  const dir = resolve(given);
  makeFolder(dir);
  const release = lockFolder(dir);
  let db: PGlite | null = null;
  try {
    db = await openDatabase(dir, options);
    const pool = new PglitePool(db);
    await migrate(pool, options.now());
    writeFileSync(join(dir, WHOLE), "");
    const store = createSqlStore(pool);
    await sweep(dir, store);
    return dataFolder(dir, db, pool, store, release);
  } catch (error) {
    await db?.close().catch(() => undefined);
    release();
    throw isDiskFull(error) ? diskFull(dir, error) : error;
  }
}

function makeFolder(dir: string): void {
  try {
    mkdirSync(dir, { recursive: true, mode: 0o700 });
  } catch (error) {
    if (isDiskFull(error)) throw diskFull(dir, error);
    throw new AppError("USAGE", `the data folder ${dir} cannot be made: ${(error as Error).message}`, {
      where: dir,
      fix: "Name a folder that you may write with --data.",
      cause: error,
    });
  }
}

async function openDatabase(dir: string, { onNotice }: OpenOptions): Promise<PGlite> {
  const dataDir = join(dir, "database");
  const isNew = !existsSync(join(dir, WHOLE));
  // Making it was cut short: nothing was ever stored in it.
  if (isNew) rmSync(dataDir, { recursive: true, force: true });
  if (freeBytes(dir) < (isNew ? ROOM_FOR_A_DATABASE : ROOM_TO_OPEN)) throw diskFull(dir);
  onNotice(
    isNew ? `making the data folder ${dir}; this takes some seconds, once` : `opening the data folder ${dir}`,
  );
  const db = await PGlite.create({ dataDir });
  onNotice("the data folder is open");
  return db;
}

/** Removes files that no committed leg refers to: they come from legs that died. */
async function sweep(dir: string, store: Store): Promise<void> {
  const kept = await store.files();
  const root = join(dir, "runs");
  mkdirSync(root, { recursive: true });
  for (const entry of readdirSync(root, { withFileTypes: true, recursive: true })) {
    if (!entry.isFile()) continue;
    const path = join(entry.parentPath, entry.name);
    const relative = path
      .slice(dir.length + 1)
      .split("\\")
      .join(posix.sep);
    if (!kept.has(relative)) rmSync(path, { force: true });
  }
}

function dataFolder(
  dir: string,
  db: PGlite,
  pool: PglitePool,
  store: Store,
  release: () => void,
): DataFolder {
  let queue: Promise<LegQueue> | null = null;
  let closing: Promise<void> | null = null;
  const close = async () => {
    try {
      if (queue !== null) await (await queue).close();
      await pool.end();
      await db.close();
    } catch (error) {
      // A database that met a full disk cannot say good-bye; it recovers from its log when it is opened again.
      if (!isDiskFull(error) && !db.closed) throw error;
    } finally {
      release();
    }
  };
  return {
    dir,
    store,
    legQueue: () => {
      queue ??= createLegQueue(pool);
      return queue;
    },
    close: () => {
      closing ??= close();
      return closing;
    },
  };
}
