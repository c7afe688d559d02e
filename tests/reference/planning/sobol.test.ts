import { readFileSync } from "node:fs";
import { expect, it } from "vitest";
import { sobolPoints } from "../../../orchestrator/planning/sobol.ts";

// Source: SciPy's generator, directions of Joe & Kuo (2008); exact, since every value is a multiple of 1/64.
const reference: { points: number[][] } = JSON.parse(
  readFileSync(new URL("sobol.json", import.meta.url), "utf8"),
);

it("agrees with SciPy's Sobol sequence in ten dimensions, bit for bit", () => {
  expect(reference.points).toHaveLength(64);
  expect(sobolPoints(64, 10)).toEqual(reference.points);
});
