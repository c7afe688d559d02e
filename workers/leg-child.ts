// The process in which legs are computed: one at a time, told by messages from its manager. run-leg.ts is the work;
// this file is the shell around it. Started by child-pool.ts only.
import { setImmediate as nextTurn } from "node:timers/promises";
import { pathToFileURL } from "node:url";
import { Worker } from "node:worker_threads";
import { z } from "zod";
import { fromChildSchema, type LegOrder, toChildSchema } from "../orchestrator/contract/index.ts";
import { loadSolvers } from "./load-solvers.ts";
import { runLeg } from "./run-leg.ts";
import type { SolverTable } from "./solver.ts";
import { WATCH_THREAD } from "./watch-over.ts";

const settings = z
  .object({
    parent: z.int(),
    memoryBytes: z.number().positive(),
    everyMs: z.number().positive(),
    /** A module with more solvers; tests alone name one. */
    extraSolvers: z.string().nullable(),
  })
  .parse(JSON.parse(process.argv[2] ?? "null"));

// A thread of its own notices that the manager is gone, or that memory runs out, while a step takes its time.
new Worker(WATCH_THREAD, { eval: true, workerData: settings, stderr: false }).unref();
process.on("disconnect", () => process.exit(0));
// Ctrl-C in a terminal reaches every process of the group; when to end is the manager's decision.
for (const signal of ["SIGINT", "SIGHUP"] as const) process.on(signal, () => undefined);

let running: LegOrder | null = null;
let stopAsked = false;

async function compute(order: LegOrder, solvers: SolverTable): Promise<void> {
  running = order;
  stopAsked = false;
  const report = await runLeg(order, {
    solvers,
    clock: () => performance.now(),
    cpuClock: () => {
      const { user, system } = process.cpuUsage();
      return (user + system) / 1000;
    },
    breathe: () => nextTurn(),
    stopAsked: () => stopAsked,
    onProgress: say,
  });
  running = null;
  say(report);
}

function say(message: z.infer<typeof fromChildSchema>): void {
  process.send?.(fromChildSchema.parse(message));
}

const { solvers, notice } = await loadSolvers(
  settings.extraSolvers === null ? null : pathToFileURL(settings.extraSolvers).href,
);
process.on("message", (raw: unknown) => {
  const message = toChildSchema.parse(raw);
  if (message.kind === "stop") stopAsked ||= message.legId === running?.legId;
  else if (running !== null)
    throw new Error(`${message.legId} was ordered while ${running.legId} is computed`);
  else
    compute(message, solvers).catch((error: unknown) => {
      // Anything that runLeg did not expect is a bug: end, so that the manager sees it with its words.
      process.stderr.write(`${error instanceof Error ? error.stack : String(error)}\n`);
      process.exit(70);
    });
});
say({ kind: "ready", notice });
