import type { LegOrder } from "./leg-order.ts";
import type { LegProgress, LegReport } from "./leg-report.ts";

/** How a leg ended, as the manager hears of it: by its own report, or by the death of the process that computed it. */
export type LegEnding =
  | { readonly kind: "reported"; readonly report: LegReport }
  | {
      readonly kind: "died";
      /** What became of the process, in words: `ended with exit status 3`, `was killed by SIGKILL`. */
      readonly reason: string;
      /** Last lines that it wrote on its outputs, oldest first. */
      readonly output: readonly string[];
      /** Whether something from outside killed it, so that the same leg may well succeed when repeated. */
      readonly fromOutside: boolean;
    };

/** Computes legs, several at a time; the manager knows nothing else about processes. */
export interface LegRunner {
  /** Legs that can be computed at the same time. */
  readonly size: number;
  /**
   * Computes one leg. When `signal` aborts, the leg is asked to checkpoint and report, and is killed if it does not
   * within the runner's grace.
   */
  run(
    order: LegOrder,
    options: { readonly signal: AbortSignal; readonly onProgress: (progress: LegProgress) => void },
  ): Promise<LegEnding>;
  /** Ends every process; legs still running are lost. */
  close(): Promise<void>;
}
