import { execFileSync } from "node:child_process";
import { readFileSync } from "node:fs";

/** What tells a process from a later one with the same number. */
export type ProcessStart = string | null;

/**
 * When a process began, as the system writes it; null where the system does not say. A process number alone may have been
 * given to another process since.
 */
export function processStart(pid: number): ProcessStart {
  return procStat(pid)?.start ?? psStart(pid);
}

/** Whether the process with this number that began then still runs. A process that ended but was not collected does not. */
export function processAlive(pid: number, start: ProcessStart): boolean {
  try {
    process.kill(pid, 0);
  } catch (error) {
    // EPERM: it exists and belongs to someone else.
    if ((error as NodeJS.ErrnoException).code !== "EPERM") return false;
  }
  const stat = procStat(pid);
  if (stat?.state === "Z" || stat?.state === "X") return false;
  const now = stat?.start ?? psStart(pid);
  return start === null || now === null || start === now;
}

/** State and start of a process from Linux's process files; fields as in proc(5), after the name in brackets. */
function procStat(pid: number): { state: string; start: string } | null {
  try {
    const text = readFileSync(`/proc/${pid}/stat`, "utf8");
    const fields = text.slice(text.lastIndexOf(")") + 2).split(" ");
    return { state: fields[0]!, start: fields[19]! };
  } catch {
    return null;
  }
}

function psStart(pid: number): ProcessStart {
  try {
    const text = execFileSync("ps", ["-o", "lstart=", "-p", String(pid)], {
      encoding: "utf8",
      timeout: 500,
      stdio: ["ignore", "pipe", "ignore"],
    }).trim();
    return text === "" ? null : text;
  } catch {
    return null;
  }
}
