import type { FoundPeriod } from "../../orchestrator/contract/index.ts";
import { batchMeans, cycleMeans, findPeriod, movingAverage } from "../estimators/index.ts";

const BLOCKS_MAX = 1024;
/** Whole cycles without which nothing is said of a periodic channel. */
export const CYCLES_MIN = 8;

/** A series without its oscillation: means over whole periods, or over neighbouring samples, oldest first. */
export interface ReducedSeries {
  readonly blocks: Float64Array;
  /** Samples in a block; not whole where the period is not. */
  readonly blockLength: number;
  /** Place in samples at which the oldest block begins. */
  readonly first: number;
  readonly period: FoundPeriod | null;
}

/**
 * Takes the oscillation out of a series, so that what is left varies only because the mean is uncertain.
 *
 *   several periods: centred moving averages over all but the longest, then means over cycles of the longest;
 *   no period: means of neighbouring samples, at most 1024 blocks
 *
 * Limits: a declared period that is wrong by a share e leaves a ripple of e times the oscillation.
 *
 * @param x shape [n], n >= 200, finite
 * @param declared periods in samples; empty: one is looked for in the last 60 %
 * @returns the blocks, or the period in samples that the record is too short for
 */
export function reduceSeries(
  x: Float64Array,
  declared: readonly number[],
): ReducedSeries | { readonly tooShortFor: number; readonly source: "declared" | "found" } {
  const source = declared.length > 0 ? "declared" : "found";
  const periods = declared.length > 0 ? essentialPeriods(declared) : foundPeriods(x);
  const [longest, ...others] = periods;
  if (longest === undefined) return { ...grouped(x, 1, 0), period: null };
  const shortened = others.reduce((sum, period) => sum + 2 * Math.ceil(period / 2), 0);
  if (x.length - shortened < CYCLES_MIN * longest + 1) return { tooShortFor: longest, source };
  let smooth = x;
  let before = 0;
  for (const period of others) {
    const { values, first } = movingAverage(smooth, period);
    smooth = values;
    before += first;
  }
  const { means, first } = cycleMeans(smooth, longest);
  const period: FoundPeriod = { samples: longest, cycles: means.length, source };
  return { ...grouped(means, longest, before + first), period };
}

function foundPeriods(x: Float64Array): number[] {
  const found = findPeriod(x.subarray(Math.floor(0.4 * x.length)));
  return found === null ? [] : [found];
}

/**
 * The periods that matter, longest first: without those too short to be resolved, and without whole fractions of longer
 * ones, which averaging over the longer ones removes anyway.
 */
export function essentialPeriods(declared: readonly number[]): number[] {
  const kept: number[] = [];
  for (const period of [...declared].filter((p) => p >= 2).sort((a, b) => b - a)) {
    const covered = kept.some((longer) => {
      const times = longer / period;
      return Math.abs(times - Math.round(times)) < 1e-9 * times;
    });
    if (!covered) kept.push(period);
  }
  return kept;
}

function grouped(y: Float64Array, unit: number, first: number): Omit<ReducedSeries, "period"> {
  const size = Math.ceil(y.length / BLOCKS_MAX);
  if (size === 1) return { blocks: y, blockLength: unit, first };
  const count = Math.floor(y.length / size);
  return {
    blocks: batchMeans(y, count),
    blockLength: size * unit,
    first: first + (y.length - count * size) * unit,
  };
}
