import type { OnsetKind } from "../../orchestrator/contract/index.ts";

/** Which monitor spoke up. */
export type AlarmSource = "non-finite" | "bound" | "guard" | "scale" | "monotone" | "spikes" | "mean-shift";

/** A monitor has spoken up. */
export interface OnsetAlarm {
  readonly channel: string;
  /** Sample at which it spoke up, 0-based. */
  readonly alarmIndex: number;
  /** What it looks like before it is located. */
  readonly kind: OnsetKind;
  readonly source: AlarmSource;
  /** Where the trouble was first seen by the monitor: a rough beginning for the search. */
  readonly suspectIndex: number;
  /** Whether the run has to stop; a shift of the mean is only a warning. */
  readonly stops: boolean;
  /** Whether there was a stable reference to compare with. */
  readonly armed: boolean;
}

/** Bounds beyond which a channel is lost. */
export interface ChannelBound {
  readonly min?: number;
  readonly max?: number;
}
