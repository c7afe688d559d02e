import type { RandomStream } from "./random.ts";

/** One kind of history with everything about it known; the judge sees the samples, tolerance and declared periods only. */
export interface Scenario {
  readonly name: string;
  readonly family: string;
  /** Null where no mean exists (drift, step): nothing may be accepted. */
  readonly trueMean: number | null;
  /** Samples after which an oracle that knows the correlation, and no start-up, meets the tolerance. */
  readonly oracle: number;
  /** Half-width to be met; equals the oracle's 1.96 standard errors at `oracle` samples. */
  readonly tolerance: number;
  readonly periods: readonly number[];
  /** Longest record, in oracle lengths, up to which the sequential rule may go. */
  readonly longest: number;
  /** Samples from the impulsive start on, shape [n]. */
  make(random: RandomStream, n: number): Float64Array;
}

/** Samples of the oracle in every scenario with noise, unless it says otherwise. */
export const ORACLE = 2000;

/** Half-width that an oracle meets after `oracle` samples of noise with this long-run standard deviation. */
export function oracleHalfWidth(longRunSd: number, oracle: number = ORACLE): number {
  return (1.959964 * longRunSd) / Math.sqrt(oracle);
}

/** Adds a deterministic part to noise. */
export function plus(
  noise: (random: RandomStream, n: number) => Float64Array,
  part: (i: number) => number,
): Scenario["make"] {
  return (random, n) => noise(random, n).map((value, i) => value + part(i));
}
