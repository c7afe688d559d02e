import { AppError, type LegOrder, type LegOutcome, type LegReport } from "../orchestrator/contract/index.ts";

/** Lines of a stack that go into the store. */
const STACK_LINES = 8;

/** Troubles that say nothing about the run: once they are mended, it goes on. */
const SET_ASIDE: ReadonlySet<string> = new Set(["HISTORY_DAMAGED", "CHECKPOINT_DAMAGED", "UNAVAILABLE"]);

/** A report of a leg that came to nothing: its files, if any, are gone, and nothing of it counts. */
export function legFailure(order: LegOrder, error: unknown): LegReport {
  const { outcome, code } = classified(error);
  return {
    kind: "report",
    legId: order.legId,
    outcome,
    message: wordsOf(error),
    code,
    accepted: false,
    cannotGoOn: outcome === "failed",
    channels: [],
    periods: [],
    dtSeconds: order.rules.dtSeconds,
    longestSteps: order.rules.longestSteps,
    steps: order.history.at(-1)?.toStep ?? 0,
    stopStep: order.judgedSteps,
    judgedSteps: order.judgedSteps,
    seconds: 0,
    cpuSeconds: 0,
    stepsDone: 0,
    history: null,
    checkpoint: null,
    judgement: null,
  };
}

function classified(error: unknown): { outcome: LegOutcome; code: string } {
  const code = error instanceof Error && "code" in error ? String(error.code) : "";
  if (code === "ENOSPC" || code === "EDQUOT") return { outcome: "disk-full", code: "DISK_FULL" };
  if (SET_ASIDE.has(code)) return { outcome: "damaged", code };
  return { outcome: "failed", code: error instanceof AppError ? error.code : "ATTEMPT_FAILED" };
}

function wordsOf(error: unknown): string {
  if (error instanceof AppError)
    return [error.message, error.where, error.fix].filter((part) => part !== undefined).join("; ");
  if (error instanceof Error)
    return (error.stack ?? error.message).split("\n").slice(0, STACK_LINES).join("\n");
  return String(error);
}
