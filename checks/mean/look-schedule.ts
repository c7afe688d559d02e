/** A look at a running record comes when it has grown by 28/25 since the look before; a fraction keeps it exact. */
const GROWTH = [28, 25] as const;
/** Fewest samples of which anything is said. */
export const SAMPLES_MIN = 200;

/**
 * Lengths of record at which a running record is looked at: a fixed ladder, so that what is accepted depends neither on
 * how the run is cut into legs nor on who asks.
 *
 *   n_0 = 200, n_{k+1} = ⌈1.12 n_k⌉
 *
 * @param length samples, >= 0
 * @returns the first length of the ladder above `length`
 */
export function nextLookLength(length: number): number {
  let look = SAMPLES_MIN;
  while (look <= length) look = Math.ceil((look * GROWTH[0]) / GROWTH[1]);
  return look;
}
