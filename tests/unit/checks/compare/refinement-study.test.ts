import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  observedOrder,
  type RefinementLevel,
  type RefinementStudy,
  refinementStudy,
} from "../../../../checks/compare/index.ts";
import { AppError } from "../../../../orchestrator/contract/index.ts";

const level = (label: string, size: number, mean: number, halfWidth = 0): RefinementLevel => ({
  label,
  size,
  mean,
  halfWidth,
  confidence: 0.95,
  isBound: false,
});
/** φ = 2 + 0.5·h^p at the given sizes. */
const power = (order: number, sizes: readonly number[], halfWidth = 0) =>
  sizes.map((size) => level(`h ${size}`, size, 2 + 0.5 * size ** order, halfWidth));

describe("observed order", () => {
  it("finds any order at any refinement ratios, from exact powers of the size", () => {
    const order = fc.double({ min: 0.3, max: 6, noNaN: true });
    const ratio = fc.double({ min: 1.15, max: 4, noNaN: true });
    fc.assert(
      fc.property(order, ratio, ratio, (p, r21, r32) => {
        const values = [0, r21 ** p - 1, (r21 * r32) ** p - 1] as const;
        const found = observedOrder({ values, r21, r32 });
        expect(found.kind).toBe("monotone");
        expect(found.order! / p).toBeCloseTo(1, 8);
      }),
      { seed: 611_230_117, numRuns: 500 },
    );
  });
  it("does not care for sign, offset (by powers of two) and scale", () => {
    const a = observedOrder({ values: [1, 1.25, 2], r21: 1.5, r32: 2 });
    const b = observedOrder({ values: [-8, -10, -16], r21: 1.5, r32: 2 });
    expect(b).toEqual(a);
  });
  it("names a sequence that runs away, instead of giving it the modulus of an order", () => {
    expect(observedOrder({ values: [0, 2, 3], r21: 2, r32: 2 })).toEqual({ kind: "divergent", order: null });
    expect(observedOrder({ values: [0, 2, 1], r21: 2, r32: 2 }).kind).toBe("oscillatory-divergent");
    expect(observedOrder({ values: [0, 1, -1], r21: 2, r32: 2 }).kind).toBe("oscillatory");
    expect(observedOrder({ values: [1, 1, 3], r21: 2, r32: 2 }).kind).toBe("unchanged");
    expect(observedOrder({ values: [0, 1, 1], r21: 2, r32: 2 }).kind).toBe("divergent");
  });
  it("weighs the ratios: equal changes converge if the coarser step was the smaller one", () => {
    expect(observedOrder({ values: [0, 1, 2], r21: 2, r32: 1.4 }).kind).toBe("monotone");
    expect(observedOrder({ values: [0, 1, 2], r21: 1.4, r32: 2 }).kind).toBe("divergent");
  });
  it("solves the equation also where the fixed-point iteration wanders", () => {
    const [r21, r32, p] = [1.05, 4, 0.4];
    const values = [0, r21 ** p - 1, (r21 * r32) ** p - 1] as const;
    expect(observedOrder({ values, r21, r32 }).order!).toBeCloseTo(p, 8);
  });
});

describe("refinement study", () => {
  it("of 2 + 0.5·h² at h = 1, 2, 4 extrapolates to 2, with an index of 1.25 times the true error 0.5", () => {
    const found = refinementStudy(power(2, [4, 1, 2]));
    expect(found.fineFirst.map((l) => l.size)).toEqual([1, 2, 4]);
    expect(found.order!).toBeCloseTo(2, 12);
    expect(found.extrapolated!.mean).toBeCloseTo(2, 12);
    expect(found.discretisation!).toBeCloseTo(1.25 * 0.5, 12);
    expect(found.statistical).toBe(0);
    expect(found.orderRange![0]).toBeCloseTo(2, 10);
    expect(found.words).toMatch(/^monotone convergence of order 2: towards 2\.00, discretisation ±0\.625/);
  });
  it("carries the statistical half-width beside the index, unmixed", () => {
    const quiet = refinementStudy(power(2, [1, 2, 4]));
    const noisy = refinementStudy(power(2, [1, 2, 4], 0.1));
    expect(noisy.discretisation).toBe(quiet.discretisation);
    expect(noisy.statistical).toBe(0.1);
    // φext = φ1 + (φ1 − φ2)/3: half-width sqrt((4/3)² + (1/3)²)·0.1.
    expect(noisy.extrapolated!.statisticalHalfWidth).toBeCloseTo((0.1 * Math.sqrt(17)) / 3, 12);
    const [low, high] = noisy.orderRange!;
    const u = 0.1 * Math.SQRT2;
    expect(low!).toBeCloseTo(Math.log2((6 - u) / (1.5 + u)), 10);
    expect(high!).toBeCloseTo(Math.log2((6 + u) / (1.5 - u)), 10);
  });
  it("observes no order where the averages are as uncertain as their changes", () => {
    const found = refinementStudy(power(2, [1, 2, 4], 1.2));
    expect(found.kind).toBe("within-noise");
    expect([found.order, found.discretisation, found.extrapolated]).toEqual([null, null, null]);
    expect(found.words).toMatch(
      /^no order can be observed: from h 2 to h 1 the value changes by -1\.5, within its statistical half-width of 1\.7/,
    );
  });
  it("never turns an observed order above the formal one into a smaller index", () => {
    const capped = refinementStudy(power(3, [1, 2, 4]), { formalOrder: 2 });
    expect(capped.order!).toBeCloseTo(3, 10);
    expect(capped.orderUsed).toBe(2);
    expect(capped.warnings).toContain("order-above-formal");
    expect(capped.discretisation!).toBeGreaterThan(refinementStudy(power(3, [1, 2, 4])).discretisation!);
  });
  it("of two levels assumes the formal order with safety 3, and without one says that nothing follows", () => {
    const assumed = refinementStudy(power(2, [1, 2]), { formalOrder: 2 });
    expect(assumed.kind).toBe("two-levels");
    expect(assumed.order).toBeNull();
    expect(assumed.discretisation!).toBeCloseTo(3 * 0.5, 12);
    expect(assumed.words).toMatch(/assumed, not observed/);
    const bare = refinementStudy(power(2, [1, 2]));
    expect(bare.discretisation).toBeNull();
    expect(bare.words).toMatch(/nothing follows/);
  });
  it("gives no error estimate for levels that run apart, swing apart or agree", () => {
    const of = (values: readonly number[]): RefinementStudy =>
      refinementStudy(values.map((value, i) => level(String(i), 2 ** i, value)));
    expect(of([0, 2, 3])).toMatchObject({ kind: "divergent", discretisation: null });
    expect(of([0, 2, 3]).words).toMatch(/run apart/);
    expect(of([0, 2, 1])).toMatchObject({ kind: "oscillatory-divergent", discretisation: null });
    expect(of([2, 2, 3])).toMatchObject({ kind: "unchanged", discretisation: null });
  });
  it("reports every triplet of four levels, the finest first", () => {
    const found = refinementStudy(power(2, [1, 2, 4, 8]));
    expect(found.orders.map((o) => o!.order!.toFixed(6))).toEqual(["2.000000", "2.000000"]);
  });
  it("warns of levels refined by less than 1.3", () => {
    expect(refinementStudy(power(2, [1, 1.2, 2])).warnings).toEqual(["refined-by-less-than-1.3"]);
  });
  it("refuses one level, equal sizes, and levels without a usable average", () => {
    const bad: RefinementLevel[][] = [
      [level("only", 1, 2)],
      [level("a", 1, 2), level("b", 1, 3)],
      [level("a", 0, 2), level("b", 1, 3)],
      [level("a", 1, Number.NaN), level("b", 2, 3)],
      [level("a", 1, 2, Number.POSITIVE_INFINITY), level("b", 2, 3)],
    ];
    for (const levels of bad) expect(() => refinementStudy(levels)).toThrow(AppError);
  });
});
