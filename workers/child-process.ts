import { type ChildProcess, fork } from "node:child_process";
import { createRequire } from "node:module";
import { fileURLToPath, pathToFileURL } from "node:url";
import {
  AppError,
  fromChildSchema,
  type LegEnding,
  type LegOrder,
  type LegProgress,
} from "../orchestrator/contract/index.ts";
import { LastLines } from "./last-lines.ts";

/** How a child is started. */
export interface ChildOptions {
  /** Memory that a child may use before it is ended. */
  readonly memoryMegabytes: number;
  /** A module with more solvers, for tests. */
  readonly extraSolvers: string | null;
  readonly onNotice: (words: string) => void;
}

/** A child that does not say that it is ready within this time is taken to be broken. */
const READY_MS = 30_000;
/** How long a child that was asked to stop may take to checkpoint. */
const GRACE_MS = 700;
/** How often a child looks whether its manager is still there. */
const WATCH_MS = 500;

/** Signals that come from outside: the same leg may well succeed when it is repeated. */
const FROM_OUTSIDE: ReadonlySet<string> = new Set(["SIGKILL", "SIGTERM", "SIGINT", "SIGHUP", "SIGQUIT"]);

/** One process that computes legs, started anew after each death. */
export class LegProcess {
  readonly #options: ChildOptions;
  #child: Promise<ChildProcess> | null = null;
  #output = new LastLines();

  constructor(options: ChildOptions) {
    this.#options = options;
  }

  /** Computes one leg; a death is an ending like any other. */
  async run(
    order: LegOrder,
    { signal, onProgress }: { signal: AbortSignal; onProgress: (progress: LegProgress) => void },
  ): Promise<LegEnding> {
    let child: ChildProcess | null;
    try {
      child = await unlessAborted(this.#ready(), signal);
    } catch (error) {
      this.#child = null;
      const reason = error instanceof Error ? error.message : String(error);
      return { kind: "died", reason, output: this.#output.lines, fromOutside: signal.aborted };
    }
    if (child === null || signal.aborted)
      return { kind: "died", reason: "it was not begun", output: [], fromOutside: true };
    return this.#converse(child, order, signal, onProgress);
  }

  /** The process, started if there is none or if it died while it had nothing to do. */
  async #ready(): Promise<ChildProcess> {
    const child = await this.#child;
    if (child != null && !isGone(child)) return child;
    this.#child = this.#start();
    return this.#child;
  }

  /** Ends the process at once. */
  async close(): Promise<void> {
    const child = await this.#child?.catch(() => null);
    this.#child = null;
    if (child == null || isGone(child)) return;
    const gone = new Promise<void>((resolve) => child.once("close", () => resolve()));
    child.kill("SIGKILL");
    await gone;
  }

  async #start(): Promise<ChildProcess> {
    this.#output = new LastLines();
    const child = forkChild(this.#options);
    for (const stream of [child.stdout, child.stderr])
      stream?.setEncoding("utf8").on("data", (text: string) => this.#output.add(text));
    await new Promise<void>((resolve, reject) => {
      const late = setTimeout(() => {
        child.kill("SIGKILL");
        reject(new Error(`the process was not ready after ${READY_MS / 1000} s`));
      }, READY_MS);
      child.once("message", (raw: unknown) => {
        clearTimeout(late);
        const message = fromChildSchema.parse(raw);
        if (message.kind === "ready" && message.notice !== null) this.#options.onNotice(message.notice);
        resolve();
      });
      child.once("close", (code, killedBy) => {
        clearTimeout(late);
        reject(new Error(`the process ${deathWords(code, killedBy)} before it was ready`));
      });
      child.once("error", reject);
    });
    return child;
  }

  #converse(
    child: ChildProcess,
    order: LegOrder,
    signal: AbortSignal,
    onProgress: (progress: LegProgress) => void,
  ): Promise<LegEnding> {
    return new Promise<LegEnding>((resolve) => {
      let kill: NodeJS.Timeout | null = null;
      const end = (ending: LegEnding): void => {
        if (kill !== null) clearTimeout(kill);
        signal.removeEventListener("abort", onAbort);
        child.off("message", onMessage);
        child.off("close", onClose);
        resolve(ending);
      };
      const onMessage = (raw: unknown): void => {
        const message = fromChildSchema.parse(raw);
        if (message.kind === "ready" || message.legId !== order.legId) return;
        if (message.kind === "progress") onProgress(message);
        else end({ kind: "reported", report: message });
      };
      const onClose = (code: number | null, killedBy: NodeJS.Signals | null): void => {
        this.#child = null;
        const fromOutside = killedBy !== null && FROM_OUTSIDE.has(killedBy);
        const reason = `the process ${deathWords(code, killedBy)}`;
        end({ kind: "died", reason, output: this.#output.lines, fromOutside });
      };
      const onAbort = (): void => {
        tell(child, { kind: "stop", legId: order.legId });
        kill = setTimeout(() => child.kill("SIGKILL"), GRACE_MS);
      };
      child.on("message", onMessage);
      child.on("close", onClose);
      if (isGone(child)) onClose(child.exitCode, child.signalCode);
      else {
        tell(child, order);
        signal.addEventListener("abort", onAbort, { once: true });
      }
    });
  }
}

/** What is awaited, or null as soon as the signal aborts: nobody waits for a process that is only starting. */
async function unlessAborted<T>(awaited: Promise<T>, signal: AbortSignal): Promise<T | null> {
  let onAbort = () => {};
  const abort = new Promise<null>((resolve) => {
    onAbort = () => resolve(null);
    if (signal.aborted) onAbort();
    else signal.addEventListener("abort", onAbort, { once: true });
  });
  try {
    return await Promise.race([awaited, abort]);
  } finally {
    signal.removeEventListener("abort", onAbort);
  }
}

function isGone(child: ChildProcess): boolean {
  return child.exitCode !== null || child.signalCode !== null;
}

/** Sends; a channel that is closed already is followed by the child's death, which is handled there. */
function tell(child: ChildProcess, message: object): void {
  child.send(message, () => undefined);
}

function forkChild({ memoryMegabytes, extraSolvers }: ChildOptions): ChildProcess {
  const fromSource = import.meta.url.endsWith(".ts");
  const entry = new URL(fromSource ? "./leg-child.ts" : "./leg-child.js", import.meta.url);
  const settings = {
    parent: process.pid,
    memoryBytes: memoryMegabytes * 2 ** 20,
    everyMs: WATCH_MS,
    extraSolvers,
  };
  return fork(fileURLToPath(entry), [JSON.stringify(settings)], {
    execArgv: [
      `--max-old-space-size=${Math.floor(memoryMegabytes)}`,
      ...(fromSource ? typescriptLoader() : []),
    ],
    stdio: ["ignore", "pipe", "pipe", "ipc"],
    // Keeps values that are no number, which JSON does not.
    serialization: "advanced",
  });
}

/** Lets Node run TypeScript, for a checkout that is not built. */
function typescriptLoader(): string[] {
  const loader = createRequire(import.meta.url).resolve("tsx");
  return ["--import", pathToFileURL(loader).href];
}

function deathWords(code: number | null, killedBy: NodeJS.Signals | null): string {
  if (killedBy === "SIGABRT") return "gave up (SIGABRT), as it does when memory runs out";
  if (killedBy !== null) return `was killed by ${killedBy}`;
  return `ended with exit status ${code}`;
}

/** A pool of no processes would compute nothing. */
export function checkedPoolSize(size: number): number {
  if (Number.isSafeInteger(size) && size >= 1 && size <= 1024) return size;
  throw new AppError("USAGE", `${size} worker processes cannot be started`, {
    where: "workers",
    fix: "Give a whole number from 1 to 1024.",
  });
}
