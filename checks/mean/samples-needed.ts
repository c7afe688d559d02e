/**
 * Total samples from the start after which the half-width would probably meet the tolerance.
 *
 *   d + (n − d) (halfWidth/tolerance)² · 1.1, within [1.25 n, 4 n]; the range spans a quarter less to a half more,
 * and starts at 2.5 n at the latest
 *
 * Limits: assumes that the rest of the run behaves like the window; a single estimate is uncertain by about a third.
 *
 * @param n samples so far
 * @param start first sample of the window, an index
 * @param ratio halfWidth/tolerance, or whatever has to shrink like 1/√n over what is allowed
 * @returns counts, low and high
 */
export function samplesNeeded(n: number, start: number, ratio: number): readonly [number, number] {
  const within = (value: number) => Math.ceil(Math.min(4 * n, Math.max(1.25 * n, value)));
  const guess = start + (n - start) * ratio ** 2 * 1.1;
  if (!Number.isFinite(guess)) return [within(0), within(4 * n)];
  // Far beyond the record nothing is known well enough for a narrow range.
  return [Math.min(within(0.75 * guess), Math.ceil(2.5 * n)), within(1.5 * guess)];
}
