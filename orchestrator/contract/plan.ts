import type { DeclaredPeriod } from "./channel.ts";

/** Allowed half-width of a mean, and scale of the drift that matters: absolute, or in percent of the mean. */
export type Tolerance = { readonly absolute: number } | { readonly percent: number };

/** When the averages of a run are good enough. */
export interface AcceptRule {
  /** Channels that all have to be accepted, with their tolerances, in the order of the campaign file. */
  readonly channels: readonly { readonly name: string; readonly tolerance: Tolerance }[];
  readonly confidence: number;
}

/** What the onset monitors look at. */
export interface OnsetRule {
  /** Names of the channels to watch, or `all` for every load and monitor (strips excepted). */
  readonly channels: "all" | readonly string[];
  /** Multiplies what the monitors need to see before they speak up; 1 is the tested setting, below 1 speaks up earlier. */
  readonly sensitivity: number;
  /** Bounds beyond which a channel is lost, by name. */
  readonly bounds: Readonly<Record<string, { readonly min?: number; readonly max?: number }>>;
}

/** A stated change of numerical settings for the next attempt after an onset. */
export interface Remedy {
  readonly name: string;
  /** Field paths and their new values. */
  readonly set: Readonly<Record<string, unknown>>;
  /** What it costs in fidelity, in the campaign author's words or ours; goes wherever the load goes. */
  readonly cost: string;
}

/** Why a run is part of a campaign. */
export type RunRole = "sweep" | "baseline" | "companion" | "single";

/** One run of an expanded campaign. */
export interface PlannedRun {
  /** Content hash of solver, model version and canonical inputs. */
  readonly runId: string;
  /** 1-based place in the campaign's listing (file order, not the order of the night). */
  readonly number: number;
  /** Short words that tell the run from its siblings: the varied values, or the name given. */
  readonly label: string;
  readonly role: RunRole;
  /** Values of the axes, by axis name; null where the axis does not apply. */
  readonly varied: Readonly<Record<string, string | number | boolean | null>>;
  /** Run that this one is compared with, if any. */
  readonly baselineRunId: string | null;
  /** For companions: the run whose sufficiency it tests, and in which respect. */
  readonly companionOf: { readonly runId: string; readonly aspect: "wake-length" | "step" | "strips" } | null;
  /** Complete canonical inputs of the solver. */
  readonly inputs: Readonly<Record<string, unknown>>;
  readonly periods: readonly DeclaredPeriod[];
  readonly dtSeconds: number;
  readonly stepsPerRevolution: number;
  /** Steps after which the run stops whatever its averages are. */
  readonly longestSteps: number;
  /** Steps before which nothing is accepted (asked for, or wake return, or the slowest declared period). */
  readonly shortestSteps: number;
  /** Step at which the kept wake can have returned to the wing on a closed path; null where it cannot. */
  readonly wakeReturnSteps: number | null;
  /** Predicted compute of the longest run, core seconds. */
  readonly predictedSeconds: number;
  readonly warnings: readonly { readonly code: string; readonly field: string; readonly words: string }[];
}

/** An expanded campaign: what would be run, by which rules, in which order. */
export interface Plan {
  /** Identifier made of the campaign's name: lower case, digits and hyphens. */
  readonly campaign: string;
  readonly title: string;
  readonly notes: string;
  readonly solver: string;
  readonly modelVersion: string;
  /** The campaign file as it was given. */
  readonly source: string;
  readonly runs: readonly PlannedRun[];
  /** Run ids in the order in which the night begins them: baselines first, then spread over the axes. */
  readonly order: readonly string[];
  readonly axes: readonly {
    readonly name: string;
    readonly values: readonly (string | number | boolean)[];
  }[];
  readonly accept: AcceptRule;
  readonly onset: OnsetRule;
  readonly remedies: readonly Remedy[];
  /** Largest harmless difference between a run and its companion; null or left out: the channel's own tolerance. */
  readonly sufficiencyTolerance?: Tolerance | null;
  /** When the night ends: a local clock time (next occurrence) or a duration from launch; null for none. */
  readonly deadline: { readonly clock: string } | { readonly durationSeconds: number } | null;
  /** Worker processes; null: one per core. */
  readonly workers: number | null;
  readonly predicted: { readonly coreSeconds: number; readonly wallSeconds: number };
  readonly warnings: readonly string[];
}
