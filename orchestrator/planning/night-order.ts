import { SOBOL_DIMENSIONS_MAX, sobolPoints } from "./sobol.ts";

/** Distance evaluations spent on the order; runs beyond what they reach follow in halving strides of file order. */
const EVALUATIONS_MAX = 4e7;

/**
 * An order of points in which every beginning spans the whole: first as few points as reach both ends of every axis, then
 * the point nearest to each member of Sobol's sequence in turn.
 *
 * @param points places in the unit cube, shape [n][axes], axes up to SOBOL_DIMENSIONS_MAX (further ones are not looked at)
 * @returns a permutation of 0..n-1; the same for the same points
 */
export function spreadingOrder(points: readonly (readonly number[])[]): number[] {
  const count = points.length;
  const axes = Math.min(points[0]?.length ?? 0, SOBOL_DIMENSIONS_MAX);
  if (axes === 0) return points.map((_, i) => i);
  const order = endPoints(points, axes);
  const waiting = new Set(points.keys());
  for (const index of order) waiting.delete(index);
  const budget = Math.floor(EVALUATIONS_MAX / (count * axes));
  // The sequence begins in a corner, which has been reached: from its second point on, the middle comes first.
  const targets = sobolPoints(Math.min(waiting.size, budget) + 1, axes);
  for (const target of targets.slice(1)) {
    const next = nearest(points, waiting, target, axes);
    order.push(next);
    waiting.delete(next);
  }
  return [...order, ...halvingStrides([...waiting])];
}

/** Few points that reach the lowest and the highest place of every axis: the one that reaches most ends first. */
function endPoints(points: readonly (readonly number[])[], axes: number): number[] {
  const open = new Set<string>();
  const low: number[] = [];
  const high: number[] = [];
  for (let axis = 0; axis < axes; axis++) {
    let least = Infinity;
    let most = -Infinity;
    for (const point of points) {
      least = Math.min(least, point[axis]!);
      most = Math.max(most, point[axis]!);
    }
    low.push(least);
    high.push(most);
    open.add(`low ${axis}`).add(`high ${axis}`);
  }
  const chosen: number[] = [];
  const reached = (point: readonly number[]): string[] =>
    low.flatMap((_, axis) => [
      ...(point[axis] === low[axis] && open.has(`low ${axis}`) ? [`low ${axis}`] : []),
      ...(point[axis] === high[axis] && open.has(`high ${axis}`) ? [`high ${axis}`] : []),
    ]);
  while (open.size > 0) {
    let best = 0;
    let most = 0;
    for (const [index, point] of points.entries()) {
      const ends = reached(point).length;
      if (ends > most) [best, most] = [index, ends];
    }
    for (const end of reached(points[best]!)) open.delete(end);
    chosen.push(best);
  }
  return chosen;
}

function nearest(
  points: readonly (readonly number[])[],
  waiting: ReadonlySet<number>,
  target: readonly number[],
  axes: number,
): number {
  let best = -1;
  let least = Infinity;
  for (const index of waiting) {
    const point = points[index]!;
    let distance = 0;
    for (let axis = 0; axis < axes; axis++) distance += (point[axis]! - target[axis]!) ** 2;
    if (distance < least) [best, least] = [index, distance];
  }
  return best;
}

/** A list in the order of van der Corput's sequence: first, middle, quarters, eighths, … */
function halvingStrides<T>(list: readonly T[]): T[] {
  if (list.length === 0) return [];
  const bits = Math.ceil(Math.log2(list.length));
  const result: T[] = [];
  for (let i = 0; i < 2 ** bits; i++) {
    let reversed = 0;
    for (let bit = 0; bit < bits; bit++) reversed = reversed * 2 + (Math.floor(i / 2 ** bit) % 2);
    if (reversed < list.length) result.push(list[reversed]!);
  }
  return result;
}
