/** Samples on either side that a spike must stand out from; also its largest width. */
export const SPIKE_REACH = 4;
/** Robust scales that a spike stands out by on both sides. */
export const SPIKE_LIMIT = 8;

/**
 * Finds samples that stand out from both sides, in the filtered signal and in the one filtered at doubled lags.
 *
 *   flag t where r_t − r_{t−4} and r_t − r_{t+4} have one sign and both exceed the limit in size, and so for r2
 *
 * A seasonal difference echoes a spike one period later; at doubled lags the echo comes two periods later, so only the
 * spike itself stands out in both. Looking to both sides leaves slow changes, steps and growing waves alone.
 *
 * @param r shape [n]; signal filtered at the declared lags
 * @param r2 shape [n]; the same at doubled lags
 * @param limit unit of the signal, > 0
 * @param found shape [>= n]; receives the positions of the flags, 4 <= position < n − 4
 * @returns number of flags
 */
export function spikeFlags(
  r: Float64Array,
  r2: Float64Array,
  n: number,
  limit: number,
  found: Int32Array,
): number {
  let count = 0;
  for (let i = SPIKE_REACH; i < n - SPIKE_REACH; i++) {
    if (Math.abs(r[i]! - r[i - SPIKE_REACH]!) <= limit) continue;
    if (standsOut(r, i, limit) && standsOut(r2, i, limit)) found[count++] = i;
  }
  return count;
}

function standsOut(values: Float64Array, i: number, limit: number): boolean {
  const before = values[i]! - values[i - SPIKE_REACH]!;
  const after = values[i]! - values[i + SPIKE_REACH]!;
  return Math.min(before, after) > limit || Math.max(before, after) < -limit;
}
