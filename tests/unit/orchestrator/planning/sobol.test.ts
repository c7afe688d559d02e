import { describe, expect, it } from "vitest";
import { SOBOL_DIMENSIONS_MAX, sobolPoints } from "../../../../orchestrator/planning/sobol.ts";

describe("sobolPoints", () => {
  it("puts one of its first 2^m points into each of 2^m parts of every axis", () => {
    for (const m of [3, 7, 10]) {
      const points = sobolPoints(2 ** m, SOBOL_DIMENSIONS_MAX);
      for (let axis = 0; axis < SOBOL_DIMENSIONS_MAX; axis++)
        expect(new Set(points.map((point) => Math.floor(point[axis]! * 2 ** m))).size).toBe(2 ** m);
    }
  });

  it("gives the same beginning however many points are asked for", () => {
    expect(sobolPoints(100, 4).slice(0, 37)).toEqual(sobolPoints(37, 4));
  });

  it("refuses more dimensions than it has directions for", () => {
    expect(() => sobolPoints(4, SOBOL_DIMENSIONS_MAX + 1)).toThrow("no Sobol points");
    expect(() => sobolPoints(4, 0)).toThrow("no Sobol points");
  });
});
