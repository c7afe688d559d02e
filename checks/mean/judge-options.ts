import { AppError, type Tolerance } from "../../orchestrator/contract/index.ts";

/** Used where no tolerance was asked for: common practice, no source. */
const DEFAULT_TOLERANCE: Tolerance = { percent: 1 };

/** How one channel is to be judged. */
export interface JudgeOptions {
  /** Time between samples, in the unit of `times`. */
  readonly dt: number;
  /** Time of each sample, for the window's times; by default index · dt. */
  readonly times?: Float64Array | undefined;
  /** Null or left out: 1 % of the mean, and the words say so. */
  readonly tolerance?: Tolerance | null | undefined;
  /** Confidence of the interval, in (0.5, 1); by default 0.95. */
  readonly confidence?: number | undefined;
  /** Periods that the channel is known to carry, in samples, real valued; empty: one is looked for. */
  readonly periods?: readonly number[] | undefined;
  /** The record was restarted from developed flow: no decaying start-up is feared beyond what the record shows. */
  readonly fromDeveloped?: boolean | undefined;
  /** Fewest samples of the record before anything is accepted; by default none beyond the checks' own. */
  readonly samplesMin?: number | undefined;
}

/** Options with every default filled in. */
export interface FullJudgeOptions {
  readonly dt: number;
  readonly times: Float64Array | null;
  readonly tolerance: Tolerance;
  readonly toleranceGiven: boolean;
  readonly confidence: number;
  readonly periods: readonly number[];
  readonly fromDeveloped: boolean;
  readonly samplesMin: number;
}

/**
 * Fills in the defaults and refuses what has no meaning.
 *
 * @throws USAGE for a step, confidence, tolerance or period out of range
 */
export function completeOptions(given: JudgeOptions): FullJudgeOptions {
  const confidence = given.confidence ?? 0.95;
  const tolerance = given.tolerance ?? DEFAULT_TOLERANCE;
  const size = "absolute" in tolerance ? tolerance.absolute : tolerance.percent;
  const periods = given.periods ?? [];
  refuseUnless(given.dt > 0 && Number.isFinite(given.dt), `a time step of ${given.dt}`, "above zero");
  refuseUnless(confidence > 0.5 && confidence < 1, `a confidence of ${confidence}`, "between 0.5 and 1");
  refuseUnless(size > 0 && Number.isFinite(size), `a tolerance of ${size}`, "above zero");
  for (const period of periods)
    refuseUnless(period > 0 && Number.isFinite(period), `a period of ${period} samples`, "above zero");
  return {
    dt: given.dt,
    times: given.times ?? null,
    tolerance,
    toleranceGiven: given.tolerance != null,
    confidence,
    periods,
    fromDeveloped: given.fromDeveloped ?? false,
    samplesMin: given.samplesMin ?? 0,
  };
}

function refuseUnless(holds: boolean, what: string, allowed: string): void {
  if (!holds) throw new AppError("USAGE", `${what} can't be judged with`, { fix: `give one ${allowed}` });
}

/** The tolerance as a half-width in the channel's unit. */
export function absoluteTolerance(tolerance: Tolerance, mean: number): number {
  return "absolute" in tolerance ? tolerance.absolute : (Math.abs(mean) * tolerance.percent) / 100;
}
