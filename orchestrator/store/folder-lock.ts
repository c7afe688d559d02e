import { randomUUID } from "node:crypto";
import {
  existsSync,
  linkSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  renameSync,
  rmSync,
  writeFileSync,
} from "node:fs";
import { hostname } from "node:os";
import { join } from "node:path";
import { z } from "zod";
import { AppError } from "../contract/index.ts";
import { processAlive, processStart } from "./process-alive.ts";

const holderSchema = z.object({
  pid: z.int(),
  start: z.string().nullable(),
  host: z.string(),
  nonce: z.string(),
});
type Holder = z.infer<typeof holderSchema>;

/** Rounds against others who want the folder at the same moment; each round somebody gets it. */
const ROUNDS_MAX = 50;

/** Gives the folder back. */
export type ReleaseFolder = () => void;

/**
 * Takes a data folder for this process alone, or says at once who has it. Two processes on one folder would lose rows
 * without an error.
 *
 * Every taking makes a file with the next number: written aside, then linked, which only one process can do. The highest
 * number rules. Numbers are never used again while the lock folder lives, so that a slow reader of an old state cannot
 * take a number that means something else by then; whoever finds a higher number than its own steps back.
 *
 * @throws DATA_FOLDER_BUSY naming the process that has it
 */
export function lockFolder(dir: string): ReleaseFolder {
  const lockDir = join(dir, "lock");
  mkdirSync(lockDir, { recursive: true, mode: 0o700 });
  const me: Holder = {
    pid: process.pid,
    start: processStart(process.pid),
    host: hostname(),
    nonce: randomUUID(),
  };
  for (let round = 0; round < ROUNDS_MAX; round++) {
    const newest = newestGeneration(lockDir);
    const holder = readHolder(lockDir, newest);
    if (holder === "gone") continue;
    if (holder !== null && stillHeld(holder)) throw busy(dir, holder);
    if (takeGeneration(lockDir, newest + 1, me)) return () => giveBack(lockDir, newest + 1);
  }
  throw new AppError("DATA_FOLDER_BUSY", `the data folder ${dir} is being taken by many processes at once`, {
    where: dir,
    fix: "Start one after the other.",
  });
}

/** Process that has the folder now; null when nobody has. */
export function folderHolder(dir: string): { readonly pid: number } | null {
  const lockDir = join(dir, "lock");
  const holder = readHolder(lockDir, newestGeneration(lockDir));
  return holder !== null && holder !== "gone" && stillHeld(holder) ? { pid: holder.pid } : null;
}

const nameOf = (word: "holder" | "free", generation: number): string =>
  `${word}-${String(generation).padStart(9, "0")}`;

function generations(lockDir: string): number[] {
  try {
    return readdirSync(lockDir).flatMap((name) => {
      const match = /^(?:holder|free)-(\d{9})$/.exec(name);
      return match === null ? [] : [Number(match[1])];
    });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ENOENT") return [];
    throw error;
  }
}

function newestGeneration(lockDir: string): number {
  return Math.max(0, ...generations(lockDir));
}

/** Who holds the folder by this generation; null when it is free, `gone` when a newer holder has removed it meanwhile. */
function readHolder(lockDir: string, generation: number): Holder | "gone" | null {
  if (generation === 0 || existsSync(join(lockDir, nameOf("free", generation)))) return null;
  let text: string;
  try {
    text = readFileSync(join(lockDir, nameOf("holder", generation)), "utf8");
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ENOENT") return "gone";
    throw error;
  }
  try {
    return holderSchema.parse(JSON.parse(text));
  } catch {
    // Files are linked whole, so a broken one comes from a disk that failed: nobody can be named, nobody holds it.
    return null;
  }
}

function stillHeld(holder: Holder): boolean {
  // A process of another machine cannot be asked.
  return holder.host !== hostname() || processAlive(holder.pid, holder.start);
}

function takeGeneration(lockDir: string, generation: number, me: Holder): boolean {
  const path = join(lockDir, nameOf("holder", generation));
  const aside = join(lockDir, `aside-${me.nonce}`);
  writeFileSync(aside, JSON.stringify(me), { mode: 0o600 });
  try {
    linkSync(aside, path);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "EEXIST") return false;
    throw error;
  } finally {
    rmSync(aside, { force: true });
  }
  const all = generations(lockDir);
  // Somebody may have taken this very number and given it back since it was looked at.
  if (Math.max(...all) > generation || existsSync(join(lockDir, nameOf("free", generation)))) {
    rmSync(path, { force: true });
    return false;
  }
  for (const old of all)
    if (old < generation)
      for (const word of ["holder", "free"] as const)
        rmSync(join(lockDir, nameOf(word, old)), { force: true });
  return true;
}

/** A change of name: it takes no room, so that a full disk cannot keep the folder from being given back. */
function giveBack(lockDir: string, generation: number): void {
  renameSync(join(lockDir, nameOf("holder", generation)), join(lockDir, nameOf("free", generation)));
}

function busy(dir: string, holder: Holder): AppError {
  const elsewhere = holder.host === hostname() ? "" : ` on ${holder.host}`;
  return new AppError(
    "DATA_FOLDER_BUSY",
    `the data folder ${dir} is in use by process ${holder.pid}${elsewhere}`,
    {
      where: dir,
      fix:
        elsewhere === ""
          ? `Wait until it is done, stop it with Ctrl-C or "kill ${holder.pid}" (it checkpoints and ends), or name another folder with --data.`
          : `Stop it there, or name another folder with --data. If that machine is gone for good, remove ${join(dir, "lock")}.`,
    },
  );
}
