import { AppError } from "../contract/index.ts";

/** Primitive polynomial (degree, inner coefficients as bits) and first direction integers of each axis after the first. */
const DIRECTIONS: readonly (readonly [degree: number, bits: number, first: readonly number[]])[] = [
  [1, 0, [1]],
  [2, 1, [1, 3]],
  [3, 1, [1, 3, 1]],
  [3, 2, [1, 1, 1]],
  [4, 1, [1, 1, 3, 3]],
  [4, 4, [1, 3, 5, 13]],
  [5, 2, [1, 1, 5, 5, 17]],
  [5, 4, [1, 1, 5, 5, 5]],
  [5, 7, [1, 1, 7, 11, 19]],
];

const BITS = 30;

/** Most dimensions that the sequence has here. */
export const SOBOL_DIMENSIONS_MAX = DIRECTIONS.length + 1;

/**
 * Sobol's low-discrepancy sequence in Gray-code order, not scrambled: every stretch of 2^m points from the start puts the
 * same number of points into each half, quarter, … of every axis.
 *
 *   x_0 = 0,  x_{n+1} = x_n XOR v_c,  c = number of trailing ones of n
 *
 * @param count number of points, up to 2^30
 * @param dimensions 1 to SOBOL_DIMENSIONS_MAX
 * @returns `count` points, each shape [dimensions], values in [0, 1), multiples of 2^-30
 * @throws BUG outside these bounds
 * @see Sobol' (1967); Antonov & Saleev (1979); directions: Joe & Kuo (2008), table new-joe-kuo-6.21201, from memory and
 *   compared with an independent library in the tests
 */
export function sobolPoints(count: number, dimensions: number): number[][] {
  if (dimensions < 1 || dimensions > SOBOL_DIMENSIONS_MAX || count > 2 ** BITS)
    throw new AppError("BUG", `no Sobol points for ${count} points in ${dimensions} dimensions`);
  const directions = Array.from({ length: dimensions }, (_, axis) => directionNumbers(axis));
  const state = new Array<number>(dimensions).fill(0);
  const points: number[][] = [];
  for (let n = 0; n < count; n++) {
    points.push(state.map((x) => x / 2 ** BITS));
    const bit = trailingOnes(n);
    for (let axis = 0; axis < dimensions; axis++) state[axis] = state[axis]! ^ directions[axis]![bit]!;
  }
  return points;
}

function trailingOnes(n: number): number {
  return 31 - Math.clz32(~n & (n + 1));
}

/** Direction numbers of one axis, scaled to BITS bits. */
function directionNumbers(axis: number): number[] {
  if (axis === 0) return Array.from({ length: BITS + 1 }, (_, i) => (2 ** (BITS - 1 - i)) | 0);
  const [degree, bits, first] = DIRECTIONS[axis - 1]!;
  const m = [...first];
  for (let i = degree; i <= BITS; i++) {
    let next = m[i - degree]! ^ (m[i - degree]! * 2 ** degree);
    for (let k = 1; k < degree; k++) if ((bits >> (degree - 1 - k)) & 1) next ^= m[i - k]! * 2 ** k;
    m.push(next >>> 0);
  }
  return m.slice(0, BITS).map((value, i) => value * 2 ** (BITS - 1 - i));
}
