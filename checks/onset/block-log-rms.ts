import { medianInPlace } from "./median-in-place.ts";

/** Sizes beyond this many medians are cut back to it: one spike must not make a block loud. */
const WINSOR = 6;

/**
 * Log of the root mean square of each block, with sizes cut back to 6 times the block's median size.
 *
 *   y_j = ½·ln(mean min(e², (6·median|e|)²) + floor²)
 *
 * @param e shape [n], finite from `from` to `to`
 * @param options.floor size below which nothing counts, unit of e
 * @returns one value a whole block, e-folds; -Infinity where block and floor are zero
 */
export function blockLogRms(
  e: Float64Array,
  options: { from: number; to: number; block: number; floor: number },
): Float64Array {
  const { from, to, block, floor } = options;
  const count = Math.max(0, Math.floor((to - from) / block));
  const out = new Float64Array(count);
  const sizes = new Float64Array(block);
  for (let j = 0; j < count; j++) {
    for (let i = 0; i < block; i++) sizes[i] = Math.abs(e[from + j * block + i]!);
    const limit = WINSOR * medianInPlace(sizes, block);
    // Scaled by the limit, so that squares of very large or small values stay in range.
    const scale = Math.max(limit, floor) || 1;
    let sum = 0;
    for (const size of sizes) sum += (Math.min(size, limit) / scale) ** 2;
    out[j] = Math.log(scale) + 0.5 * Math.log(sum / block + (floor / scale) ** 2);
  }
  return out;
}
