/** More axes than this are tested at a fraction of their corners. */
const FULL_CORNERS_AXES = 3;

/**
 * Points at the corners and in the middle of a sweep: the nearest point to each corner of the cube, and to its centre. With
 * more than three axes a fraction of the corners is taken in which every axis stands at both ends equally often, and every
 * pair of axes in all four combinations (a two-level fractional factorial design of resolution III, Box & Hunter 1961).
 *
 * @param points places in the unit cube, shape [n][axes]
 * @returns indices, the middle first, none twice; empty for no points
 */
export function cornersAndMiddle(points: readonly (readonly number[])[]): number[] {
  const axes = points[0]?.length ?? 0;
  if (points.length === 0) return [];
  const middle = new Array<number>(axes).fill(0.5);
  return [...new Set([middle, ...cornersOf(axes)].map((target) => nearestTo(points, target)))];
}

/** Index of the point in the middle of a sweep. */
export function middleOf(points: readonly (readonly number[])[]): number {
  return nearestTo(points, new Array<number>(points[0]?.length ?? 0).fill(0.5));
}

function cornersOf(axes: number): number[][] {
  const factors = axes <= FULL_CORNERS_AXES ? axes : Math.ceil(Math.log2(axes + 1));
  // Column of an axis: which factors are multiplied. The factors themselves come first, then their products.
  const columns = Array.from({ length: 2 ** factors - 1 }, (_, i) => i + 1)
    .sort((a, b) => bitCount(a) - bitCount(b) || a - b)
    .slice(0, axes);
  return Array.from({ length: 2 ** factors }, (_, run) =>
    columns.map((column) => bitCount(run & column) % 2),
  );
}

function bitCount(n: number): number {
  let count = 0;
  for (let rest = n; rest > 0; rest >>= 1) count += rest & 1;
  return count;
}

function nearestTo(points: readonly (readonly number[])[], target: readonly number[]): number {
  let best = 0;
  let least = Infinity;
  for (const [index, point] of points.entries()) {
    const distance = point.reduce((sum, x, axis) => sum + (x - target[axis]!) ** 2, 0);
    if (distance < least - 1e-12) [best, least] = [index, distance];
  }
  return best;
}
