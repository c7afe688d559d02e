/** A look at a running record comes when it has grown by this factor since the look before. */
const GROWTH = 1.25;
/** Fewest samples of which anything is said. */
export const SAMPLES_MIN = 200;

/**
 * Lengths of record at which a running record is looked at: a fixed ladder, so that what is accepted depends neither on
 * how the run is cut into legs nor on who asks.
 *
 *   n_0 = 200, n_{k+1} = ⌈1.25 n_k⌉
 *
 * @param length samples, >= 0
 * @returns the first length of the ladder above `length`
 */
export function nextLookLength(length: number): number {
  let look = SAMPLES_MIN;
  while (look <= length) look = Math.ceil(look * GROWTH);
  return look;
}

/**
 * The look before one at this length: the longest length of the ladder below it, but at most its 0.8-fold, so that
 * both looks differ by what one step of the ladder adds.
 *
 * @param length samples, >= 1
 * @returns a count in [0, 0.8 length]
 */
export function lengthOfLookBefore(length: number): number {
  return Math.floor(length / GROWTH);
}
