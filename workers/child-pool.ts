// Where legs are computed: run-leg.ts is the leg loop, leg-child.ts the process around it, this file the processes that
// are kept ready. The model is in model/, a user's own solver in external/. Nothing here knows the queue or the store.
import type { LegRunner } from "../orchestrator/contract/index.ts";
import { type ChildOptions, checkedPoolSize, LegProcess } from "./child-process.ts";

/** Memory that a run may use unless told otherwise. */
const MEMORY_MEGABYTES = 2048;

/** Processes to keep, and what to tell about them. */
export interface ChildPoolOptions {
  /** Legs computed at the same time. */
  readonly size: number;
  readonly memoryMegabytes?: number;
  /** Called when there is something to say about how a process was started. */
  readonly onNotice?: (words: string) => void;
  /** Path of a module with more solvers. Tests alone set it; it is never taken from a campaign. */
  readonly extraSolvers?: string;
}

/** Keeps child processes and lets each compute one leg at a time; they are started when first needed and used again. */
export function createChildPool(options: ChildPoolOptions): LegRunner {
  const size = checkedPoolSize(options.size);
  const childOptions: ChildOptions = {
    memoryMegabytes: options.memoryMegabytes ?? MEMORY_MEGABYTES,
    extraSolvers: options.extraSolvers ?? null,
    onNotice: options.onNotice ?? (() => undefined),
  };
  const all = Array.from({ length: size }, () => new LegProcess(childOptions));
  const idle = [...all];
  return {
    size,
    run: async (order, how) => {
      // The one used last is the warmest.
      const one = idle.pop();
      if (one === undefined) throw new Error(`more than ${size} legs were given to a pool of ${size}`);
      try {
        return await one.run(order, how);
      } finally {
        idle.push(one);
      }
    },
    close: async () => {
      await Promise.all(all.map((one) => one.close()));
    },
  };
}
