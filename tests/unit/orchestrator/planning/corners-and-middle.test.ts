import { describe, expect, it } from "vitest";
import { cornersAndMiddle } from "../../../../orchestrator/planning/corners-and-middle.ts";

/** All combinations of 0, 0.5 and 1 on so many axes. */
function threeLevels(axes: number): number[][] {
  let points: number[][] = [[]];
  for (let i = 0; i < axes; i++) points = points.flatMap((p) => [0, 0.5, 1].map((x) => [...p, x]));
  return points;
}

describe("cornersAndMiddle", () => {
  it("finds the middle and every corner of up to three axes", () => {
    for (const axes of [1, 2, 3]) {
      const points = threeLevels(axes);
      const chosen = cornersAndMiddle(points).map((index) => points[index]!);
      expect(chosen[0]).toEqual(new Array(axes).fill(0.5));
      expect(chosen).toHaveLength(1 + 2 ** axes);
      expect(chosen.slice(1).every((point) => point.every((x) => x !== 0.5))).toBe(true);
    }
  });

  // Property of resolution III designs (Box & Hunter 1961): any two columns are orthogonal.
  it("takes eight corners of four to six axes, with each pair of axes at all four combinations equally often", () => {
    for (const axes of [4, 5, 6]) {
      const points = threeLevels(axes);
      const corners = cornersAndMiddle(points)
        .slice(1)
        .map((index) => points[index]!);
      expect(corners).toHaveLength(8);
      for (let a = 0; a < axes; a++)
        for (let b = 0; b < a; b++) {
          const pairs = corners.map((point) => `${point[a]} ${point[b]}`);
          for (const pair of ["0 0", "0 1", "1 0", "1 1"])
            expect(pairs.filter((p) => p === pair)).toHaveLength(2);
        }
    }
  });

  it("names no point twice, and copes with one point and none", () => {
    expect(cornersAndMiddle([[0.5, 0.5]])).toEqual([0]);
    expect(cornersAndMiddle([[]])).toEqual([0]);
    expect(cornersAndMiddle([])).toEqual([]);
  });
});
