import { batchMeans, mser } from "../estimators/index.ts";

const MEANS = 50;

/**
 * Block at which the start-up is over, by the marginal standard error rule on about 50 means of the record.
 *
 * Limits: those of the rule: a start-up much smaller than the noise is not seen, and need not be; one that fills the
 * record gives a cut near its middle.
 *
 * @param blocks shape [m], m >= 8, finite
 * @returns index of the first block kept, at most m/2
 * @throws HISTORY_INVALID, NON_FINITE
 * @see White (1997); White, Cobb & Spratt (2000)
 */
export function startUpEnd(blocks: Float64Array): number {
  const count = Math.min(MEANS, blocks.length);
  const size = Math.floor(blocks.length / count);
  const dropped = blocks.length - size * count;
  const cut = mser(batchMeans(blocks, count));
  return cut === 0 ? 0 : dropped + cut * size;
}
