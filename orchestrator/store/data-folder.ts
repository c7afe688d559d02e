import type { LegQueue } from "../queue/leg-queue.ts";
import type { Store } from "./store.ts";

/** A data folder that this process holds and nobody else does. */
export interface DataFolder {
  /** Absolute path. */
  readonly dir: string;
  readonly store: Store;
  /** The queue of legs, opened at first use. */
  legQueue(): Promise<LegQueue>;
  /** Closes queue and store and gives the folder back. */
  close(): Promise<void>;
}
