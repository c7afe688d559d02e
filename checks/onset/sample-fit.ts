import type { BaselineResidual } from "./baseline-residual.ts";
import { blockLogRms } from "./block-log-rms.ts";
import { fitGrowth, type GrowthFit, onsetBand } from "./growth-fit.ts";

/** Rate, e-folds a block, above which shorter blocks are used. */
const FAST_RATE = 0.5;

/** A growth fit in samples instead of blocks. */
export interface SampleFit {
  readonly block: number;
  readonly onset: number;
  readonly saturation: number;
  /** E-folds a step. */
  readonly rate: number;
  readonly band: readonly [number, number];
  readonly base: number;
}

/** Fits a growth to a channel's residual in blocks of the given length, from the grid or near an earlier fit. */
export function fitBlocks(
  residual: BaselineResidual,
  block: number,
  { from = residual.from, near }: { from?: number; near?: SampleFit } = {},
): SampleFit {
  const y = blockLogRms(residual.e, { from, to: residual.to, block, floor: residual.floor });
  const inBlocks = (sample: number) => (sample - from) / block - 0.5;
  const start = near && {
    onset: inBlocks(near.onset),
    rate: near.rate * block,
    saturation: inBlocks(near.saturation),
  };
  const fit: GrowthFit = fitGrowth(y, start);
  const sample = (j: number) => from + (j + 0.5) * block;
  const [first, last] = onsetBand(y, fit);
  return {
    block,
    onset: sample(fit.onset),
    saturation: sample(fit.saturation),
    rate: fit.rate / block,
    band: [sample(first), sample(last)],
    base: fit.base,
  };
}

/** Whether a growth is so fast that its blocks say little about its beginning. */
export function isFast(fit: SampleFit): boolean {
  return fit.rate * fit.block > FAST_RATE;
}

/** Repeats a fast fit with blocks of 6 to 10 steps around the onset. */
export function fitFast(residual: BaselineResidual, fit: SampleFit, block: number): SampleFit {
  const short = Math.min(block, Math.max(6, Math.min(10, Math.round(FAST_RATE / fit.rate))));
  if (short >= block) return fit;
  const back = Math.floor(Math.min(fit.onset - residual.from, 20 * block) / short);
  const start = Math.max(residual.from, Math.round(fit.onset) - back * short);
  return fitBlocks(residual, short, { from: start });
}
