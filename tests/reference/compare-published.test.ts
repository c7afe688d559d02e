import { describe, expect, it } from "vitest";
import {
  damageEquivalentAmplitude,
  gridConvergenceIndex,
  observedOrder,
  rainflow,
  refinementStudy,
  SAFETY_THREE_GRIDS,
  turningPoints,
} from "../../checks/compare/index.ts";

const level = (label: string, size: number, mean: number) => ({
  label,
  size,
  mean,
  halfWidth: 0,
  confidence: 0.95,
  isBound: false,
});
/** Three grids of a plane flow, told by their numbers of cells: size 1/sqrt(cells). */
const study = (cells: readonly number[], values: readonly number[]) =>
  refinementStudy(values.map((value, i) => level(`${cells[i]} cells`, cells[i]! ** -0.5, value)));
const percentOf = (part: number, whole: number) => Math.abs((100 * part) / whole);

// Celik, Ghia, Roache, Freitas, Coleman & Raad (2008), Procedure for estimation and reporting of uncertainty due to
// discretization in CFD applications, J. Fluids Eng. 130, 078001, table 1. Values from memory; each is held to
// half a unit of the last digit that is given here, where nothing else is said.
describe("the three sample calculations of Celik et al. (2008), table 1 (from memory)", () => {
  it("reattachment length, monotone, ratios 1.5 and 1.333: order 1.53, 6.1685, 2.2 %", () => {
    const found = study([18_000, 8000, 4500], [6.063, 5.972, 5.863]);
    expect(found.kind).toBe("monotone");
    expect(found.changes[0]!.ratio).toBeCloseTo(1.5, 10);
    expect(found.changes[1]!.ratio).toBeCloseTo(1.333, 3);
    expect(Math.abs(found.order! - 1.53)).toBeLessThan(0.005);
    expect(Math.abs(found.extrapolated!.mean - 6.1685)).toBeLessThan(0.00005);
    expect(percentOf(found.changes[0]!.change, 6.063)).toBeCloseTo(1.5, 1);
    expect(percentOf(found.extrapolated!.mean - 6.063, found.extrapolated!.mean)).toBeCloseTo(1.7, 1);
    expect(percentOf(found.discretisation!, 6.063)).toBeCloseTo(2.2, 1);
  });
  it("axial velocity, order below one, ratios 2 and 2.143: order 0.75, 10.8801, 1.1 %", () => {
    const found = study([18_000, 4500, 980], [10.788, 10.725, 10.605]);
    expect(found.kind).toBe("monotone");
    expect(found.changes[1]!.ratio).toBeCloseTo(2.143, 3);
    expect(Math.abs(found.order! - 0.75)).toBeLessThan(0.005);
    expect(Math.abs(found.extrapolated!.mean - 10.8801)).toBeLessThan(0.00005);
    expect(percentOf(found.changes[0]!.change, 10.788)).toBeCloseTo(0.6, 1);
    // The table prints 0.9; its own extrapolated value and 10.7880 give 0.847.
    expect(
      Math.abs(percentOf(found.extrapolated!.mean - 10.788, found.extrapolated!.mean) - 0.9),
    ).toBeLessThan(0.06);
    expect(percentOf(found.discretisation!, 10.788)).toBeCloseTo(1.1, 1);
  });
  it("axial velocity, oscillatory: order 1.51, 6.0269, 0.5 %, and named so", () => {
    const found = study([18_000, 4500, 980], [6.0042, 5.9624, 6.0909]);
    expect(found.kind).toBe("oscillatory");
    expect(found.warnings).toContain("oscillatory");
    expect(Math.abs(found.order! - 1.51)).toBeLessThan(0.005);
    expect(Math.abs(found.extrapolated!.mean - 6.0269)).toBeLessThan(0.00005);
    expect(percentOf(found.discretisation!, 6.0042)).toBeCloseTo(0.5, 1);
  });
});

// NASA's NPARC Alliance tutorial on spatial convergence: pressure recovery of an inlet on three grids, ratio 2 (from memory).
describe("the pressure recovery example of the NPARC tutorial (from memory)", () => {
  const values = [0.9705, 0.96854, 0.96178] as const;
  it("has order 1.786170, limit 0.97130, indices of 0.103083 % and 0.356249 %", () => {
    const found = refinementStudy(values.map((value, i) => level(`grid ${i + 1}`, 2 ** i, value)));
    expect(found.order!).toBeCloseTo(1.78617, 5);
    expect(found.extrapolated!.mean).toBeCloseTo(0.9713, 5);
    expect(percentOf(found.discretisation!, values[0])).toBeCloseTo(0.103083, 6);
    const { order } = observedOrder({ values, r21: 2, r32: 2 });
    const coarse = gridConvergenceIndex(values[2] - values[1], {
      ratio: 2,
      order: order!,
      safety: SAFETY_THREE_GRIDS,
    });
    expect(percentOf(coarse, values[1])).toBeCloseTo(0.356249, 6);
    // The tutorial's 0.997980, which is nothing but the ratio of the two values.
    const ratio = percentOf(coarse, values[1]) / (2 ** order! * percentOf(found.discretisation!, values[0]));
    expect(ratio).toBeCloseTo(values[0] / values[1], 10);
    expect(Math.abs(1 / ratio - 0.99798)).toBeLessThan(5e-6);
  });
});

// ASTM E1049-85, figure 6 and its table: peaks and valleys A to I (from memory).
describe("the worked example of ASTM E1049-85 (from memory)", () => {
  const history = Float64Array.of(-2, 1, -3, 5, -1, 3, -4, 4, -2);
  const table = (residue?: "repeating") => {
    const sums = new Map<number, number>();
    for (const { range, count } of rainflow(history, residue).cycles)
      sums.set(range, (sums.get(range) ?? 0) + count);
    return Object.fromEntries([...sums].sort(([a], [b]) => a - b));
  };
  it("section 5.4.4 counts 0.5 of range 3, 1.5 of 4, 0.5 of 6, 1 of 8, 0.5 of 9", () => {
    expect(turningPoints(history)).toEqual(history);
    expect(table()).toEqual({ 3: 0.5, 4: 1.5, 6: 0.5, 8: 1, 9: 0.5 });
  });
  it("the only whole cycle is E–F, of range 4 about 1", () => {
    expect(rainflow(history).cycles.filter((cycle) => cycle.count === 1)).toEqual([
      { range: 4, mean: 1, count: 1 },
    ]);
  });
  it("section 5.4.5, repeating from D on, counts 1 each of ranges 3, 4, 7 and 9", () => {
    expect(table("repeating")).toEqual({ 3: 1, 4: 1, 7: 1, 9: 1 });
  });
  it("its damage-equivalent range at slope 1 and one cycle is the sum of range times count, 24", () => {
    const found = damageEquivalentAmplitude(rainflow(history), { slope: 1, equivalentCycles: 1 });
    expect(found.range).toBeCloseTo(0.5 * 3 + 1.5 * 4 + 0.5 * 6 + 8 + 0.5 * 9, 12);
    expect(found.amplitude).toBeCloseTo(found.range / 2, 12);
  });
});
