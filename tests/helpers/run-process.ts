import { type ChildProcessWithoutNullStreams, spawn } from "node:child_process";
import { join } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";
import type { Outcome } from "./run-in-process.ts";

const root = fileURLToPath(new URL("../../", import.meta.url));
const loader = pathToFileURL(join(root, "node_modules/tsx/dist/loader.mjs")).href;

/** Starts the program as a process of its own, from the sources. */
export function startProcess(
  args: readonly string[],
  options: { cwd?: string; env?: NodeJS.ProcessEnv } = {},
): ChildProcessWithoutNullStreams {
  return spawn(process.execPath, ["--import", loader, join(root, "orchestrator/cli/main.ts"), ...args], {
    cwd: options.cwd ?? root,
    env: { ...process.env, MIDWATCH_DATA: "", ...options.env },
  });
}

/** Runs the program as a process of its own and waits for its end; a status of -2 is a death by signal. */
export async function runProcess(
  args: readonly string[],
  options: { cwd?: string; env?: NodeJS.ProcessEnv } = {},
): Promise<Outcome> {
  const child = startProcess(args, options);
  let stdout = "";
  let stderr = "";
  child.stdout.setEncoding("utf8").on("data", (text: string) => {
    stdout += text;
  });
  child.stderr.setEncoding("utf8").on("data", (text: string) => {
    stderr += text;
  });
  const status = await new Promise<number>((resolve, reject) => {
    child.once("error", reject);
    child.once("close", (code, signal) => resolve(code ?? (signal === null ? -1 : -2)));
  });
  return { status, stdout, stderr };
}
