import { readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { z } from "zod";
import { folderHolder } from "./folder-lock.ts";

const serverSchema = z.object({
  pid: z.int(),
  port: z.int().min(1).max(65535),
  token: z.string().min(16),
});

/** Where the process that holds a data folder answers, and the word that it wants to hear. */
export type ServerInfo = z.infer<typeof serverSchema>;

const pathIn = (dir: string) => join(dir, "server.json");

/** Tells other commands of this user where to ask; readable by nobody else. */
export function writeServerFile(dir: string, info: ServerInfo): void {
  const aside = `${pathIn(dir)}.${info.pid}`;
  writeFileSync(aside, JSON.stringify(serverSchema.parse(info)), { mode: 0o600 });
  renameSync(aside, pathIn(dir));
}

/** Where the holder of the folder answers; null when nobody holds it or the holder does not answer requests. */
export function readServerFile(dir: string): ServerInfo | null {
  const holder = folderHolder(dir);
  if (holder === null) return null;
  let text: string;
  try {
    text = readFileSync(pathIn(dir), "utf8");
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ENOENT") return null;
    throw error;
  }
  const info = serverSchema.safeParse(JSON.parse(text));
  // One left behind by an earlier holder says nothing about this one.
  return info.success && info.data.pid === holder.pid ? info.data : null;
}

/** Takes the word back when the server ends. */
export function removeServerFile(dir: string): void {
  rmSync(pathIn(dir), { force: true });
}
