import { requireFinite } from "./finite-series.ts";

/**
 * Means of equally long batches that end with the series; what does not fill a batch is dropped from its beginning.
 *
 *   b_j = (1/m) Σ_{i in batch j} x_i, m = ⌊n / batches⌋
 *
 * Limits: independent of each other only if m is many correlation times.
 *
 * @param x shape [n], n >= batches, finite
 * @param batches a count >= 1
 * @returns shape [batches], unit of x
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Schmeiser (1982), Batch size effects in the analysis of simulation output
 */
export function batchMeans(x: Float64Array, batches: number): Float64Array {
  requireFinite(x, "batch means", Math.max(1, batches));
  const size = Math.floor(x.length / batches);
  const dropped = x.length - size * batches;
  const out = new Float64Array(batches);
  for (let j = 0; j < batches; j++) {
    let sum = 0;
    for (let i = 0; i < size; i++) sum += x[dropped + j * size + i]!;
    out[j] = sum / size;
  }
  return out;
}
