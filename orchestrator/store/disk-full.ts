import { statfsSync } from "node:fs";
import { AppError } from "../contract/index.ts";

/** Free bytes for this user on the disk that holds a folder. */
export function freeBytes(dir: string): number {
  const disk = statfsSync(dir);
  return disk.bavail * disk.bsize;
}

/** Whether an error of the file system or the database says that the disk is full. */
export function isDiskFull(error: unknown): boolean {
  for (let at: unknown = error, depth = 0; at instanceof Error && depth < 8; at = at.cause, depth++) {
    const code = "code" in at ? String(at.code) : "";
    // 53100 is PostgreSQL's own "disk full"; a write that failed deeper down comes with the system's words only.
    if (["ENOSPC", "EDQUOT", "53100", "DISK_FULL"].includes(code)) return true;
    if (/No space left on device|ENOSPC/i.test(at.message)) return true;
  }
  return false;
}

/** The disk is full, said the way a person can act on. */
export function diskFull(dir: string, cause?: unknown): AppError {
  return new AppError("DISK_FULL", `the disk that holds ${dir} is full`, {
    where: dir,
    fix: "Free some space, or name a folder on another disk with --data; then launch again: it goes on from the last checkpoint.",
    cause,
  });
}
