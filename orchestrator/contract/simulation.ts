import type { ChannelInfo, DeclaredPeriod } from "./channel.ts";

/**
 * What the leg loop needs of a time-marching solver. A simulation made afresh stands before its first step
 * (`stepIndex` 0); one restored from a checkpoint goes on bit-identically.
 */
export interface Simulation {
  /** What each entry of a sample is, in order; the first is never time. */
  readonly channels: readonly ChannelInfo[];
  readonly periods: readonly DeclaredPeriod[];
  readonly dtSeconds: number;
  /** Steps done so far. */
  readonly stepIndex: number;
  /** Does one step; throws NON_FINITE, naming quantity and step, before a non-finite state could be recorded. */
  step(): void;
  /** Writes the quantities of the last step into `out`, shape [channels.length]. */
  sample(out: Float64Array): void;
  /** The whole state; grows and shrinks with the wake. */
  checkpoint(): Uint8Array;
}
