import { mean } from "../estimators/index.ts";

/** Share of one third's movement that the next may keep and still be called slowing down. */
const SLOWING = 0.7;

/**
 * How the mean of a record moves: through the means of its last three quarters, one by one.
 *
 * Limits: a rough sketch for choosing words and between `needs-longer` and `drifting`; nothing is accepted by it.
 *
 * @param blocks shape [m], m >= 4, finite
 * @returns whether each step is in the same direction and at most 0.7 of the one before
 */
export function movementSlows(blocks: Float64Array): boolean {
  const m = blocks.length;
  const part = (k: number) => mean(blocks.subarray(Math.floor((k * m) / 4), Math.floor(((k + 1) * m) / 4)));
  const [a, b, c] = [part(1), part(2), part(3)];
  const before = b - a;
  const last = c - b;
  return before * last >= 0 && Math.abs(last) <= SLOWING * Math.abs(before);
}
