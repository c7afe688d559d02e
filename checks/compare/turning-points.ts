/**
 * Peaks and valleys of a series, its first and last sample included; of a plateau the first sample counts.
 *
 * @param x shape [n], finite
 * @returns shape [m], m <= n, alternating; empty for empty, one value for a constant series
 */
export function turningPoints(x: Float64Array): Float64Array {
  const out = new Float64Array(x.length);
  let m = 0;
  for (let i = 0; i < x.length; i++) {
    const value = x[i]!;
    if (m > 0 && value === out[m - 1]!) continue;
    // Going on in the same direction replaces the last point; turning adds one.
    const onward = m > 1 && value > out[m - 1]! === out[m - 1]! > out[m - 2]!;
    out[onward ? m - 1 : m++] = value;
  }
  return out.slice(0, m);
}
