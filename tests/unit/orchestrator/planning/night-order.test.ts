import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { spreadingOrder } from "../../../../orchestrator/planning/night-order.ts";

/** Every point of a grid with so many levels on each axis, places from 0 to 1. */
function grid(levels: readonly number[]): number[][] {
  return levels.reduce<number[][]>(
    (points, n) =>
      points.flatMap((p) => Array.from({ length: n }, (_, i) => [...p, n === 1 ? 0.5 : i / (n - 1)])),
    [[]],
  );
}

/** Largest stretch of an axis, of its whole range, that no point lies in. */
function largestGap(places: readonly number[], low: number, high: number): number {
  const sorted = [low, ...places.toSorted((a, b) => a - b), high];
  return Math.max(...sorted.slice(1).map((x, i) => x - sorted[i]!));
}

/** Largest k·(gap − spacing) over all beginnings of k runs (two an axis and more) and all axes. */
function worstExcess(
  points: readonly number[][],
  order: readonly number[],
  levels: readonly number[],
): number {
  const visited = order.map((index) => points[index]!);
  let worst = 0;
  for (let k = 2 * levels.length + 1; k <= visited.length; k++)
    for (const [axis, n] of levels.entries()) {
      const gap = largestGap(
        visited.slice(0, k).map((point) => point[axis]!),
        0,
        1,
      );
      worst = Math.max(worst, k * (gap - 1 / (n - 1)));
    }
  return worst;
}

describe("spreadingOrder", () => {
  it("visits every point once", () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 1, max: 6 }), { minLength: 1, maxLength: 4 }), (levels) => {
        const points = grid(levels);
        expect(spreadingOrder(points).toSorted((a, b) => a - b)).toEqual(points.map((_, i) => i));
      }),
      { numRuns: 100, seed: 20_261_201 },
    );
  });

  it("reaches both ends of every axis with the first two runs of a full grid", () => {
    for (const levels of [
      [2, 2],
      [5, 3, 2],
      [20, 20],
      [3, 3, 3, 3],
    ]) {
      const points = grid(levels);
      const [a, b] = spreadingOrder(points).map((index) => points[index]!);
      for (const axis of levels.keys()) expect([a![axis], b![axis]].toSorted()).toEqual([0, 1]);
    }
  });

  it("leaves no gap above 2/k and one spacing on any axis of a full grid after k runs; file order leaves a third", () => {
    // The bound is measured, and holds from two runs an axis on.
    for (const levels of [[9], [20], [9, 9], [9, 5, 3], [4, 4, 4], [9, 9, 9]]) {
      const points = grid(levels);
      expect(worstExcess(points, spreadingOrder(points), levels)).toBeLessThanOrEqual(2);
    }
    const points = grid([9, 9]);
    expect(worstExcess(points, [...points.keys()], [9, 9])).toBeGreaterThan(10);
  });

  it("keeps to 4/k and one spacing when a tenth of the grid is left out", () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 4, max: 9 }), { minLength: 2, maxLength: 3 }),
        fc.integer({ min: 0, max: 1000 }),
        (levels, salt) => {
          const points = grid(levels).filter((_, i) => (i * 7919 + salt * 104_729) % 10 !== 0);
          expect(worstExcess(points, spreadingOrder(points), levels)).toBeLessThanOrEqual(4);
        },
      ),
      { numRuns: 60, seed: 4_711_001 },
    );
  });

  it("takes the middle right after the ends", () => {
    const points = grid([5, 5]);
    expect(points[spreadingOrder(points)[2]!]).toEqual([0.5, 0.5]);
  });

  it("orders 100 000 runs within seconds and still begins with ends and middle", () => {
    const points = grid([100, 100, 10]);
    const order = spreadingOrder(points);
    expect(new Set(order).size).toBe(100_000);
    const begin = order.slice(0, 64).map((index) => points[index]!);
    for (const axis of [0, 1, 2])
      expect(
        largestGap(
          begin.map((p) => p[axis]!),
          0,
          1,
        ),
      ).toBeLessThan(0.12);
  });

  it("keeps file order where there is no axis", () => {
    expect(spreadingOrder([[], [], []])).toEqual([0, 1, 2]);
    expect(spreadingOrder([])).toEqual([]);
  });
});
