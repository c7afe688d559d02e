import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  autocovariance,
  autoregression,
  batchMeans,
  effectiveSampleSize,
  longRunVarianceAutoregressive,
  longRunVarianceBartlett,
  mean,
  mser,
  variance,
  vonNeumannRatio,
} from "../../../../checks/index.ts";

const series = fc.float64Array({ minLength: 8, maxLength: 60, noNaN: true, min: -1e3, max: 1e3 });
const of = (...values: number[]) => Float64Array.of(...values);

describe("worked by hand", () => {
  it("1, 2, 3, 6: mean 3, variance 14/3", () => {
    expect(mean(of(1, 2, 3, 6))).toBe(3);
    expect(variance(of(1, 2, 3, 6))).toBeCloseTo(14 / 3, 14);
  });
  it("1, 2, 3: autocovariances 2/3, 0, -1/3, divided by n", () => {
    const [g0, g1, g2] = autocovariance(of(1, 2, 3), 9);
    expect([g0, g1, g2]).toEqual([2 / 3, 0, -1 / 3]);
  });
  it("batches end with the series: 9, 1, 2, 3, 4 in two batches drops the 9", () => {
    expect([...batchMeans(of(9, 1, 2, 3, 4), 2)]).toEqual([1.5, 3.5]);
  });
  it("1, 2, 3, 4 has von Neumann's ratio 3/5", () => {
    expect(vonNeumannRatio(of(1, 2, 3, 4)).ratio).toBeCloseTo(0.6, 14);
  });
  it("1, -1, 1, -1: one lag of the Bartlett kernel takes 3/4 of the variance away", () => {
    // γ0 = 1, γ1 = −3/4, weight 1/2.
    expect(longRunVarianceBartlett(of(1, -1, 1, -1), 1)).toBeCloseTo(0.25, 14);
  });
  it("the start-up rule cuts three high values before a level", () => {
    expect(mser(of(9, 8, 7, 1, 1.1, 0.9, 1, 1.1, 0.9, 1))).toBe(3);
  });
  it("the start-up rule never cuts more than half, though the rest still moves", () => {
    expect(mser(Float64Array.from({ length: 20 }, (_, i) => i))).toBe(10);
  });
});

describe("properties", () => {
  it("scaling by a power of two scales variance and long-run variance exactly by its square", () => {
    fc.assert(
      fc.property(series, (given) => {
        // Squares of the tiniest numbers underflow, and nothing is exact there.
        const x = given.map((v) => (Math.abs(v) < 1e-100 ? 0 : v));
        const scaled = x.map((v) => 4 * v);
        expect(variance(scaled)).toBe(16 * variance(x));
        expect(longRunVarianceBartlett(scaled, 3)).toBe(16 * longRunVarianceBartlett(x, 3));
      }),
    );
  });
  it("autocovariances are bounded by the one of lag zero", () => {
    fc.assert(
      fc.property(series, (x) => {
        const gamma = autocovariance(x, 10);
        for (const g of gamma) expect(Math.abs(g)).toBeLessThanOrEqual(gamma[0]! * (1 + 1e-12));
      }),
    );
  });
  it("the autoregression is stationary: its long-run variance is finite and not negative", () => {
    fc.assert(
      fc.property(series, (x) => {
        const { longRunVariance } = longRunVarianceAutoregressive(x);
        expect(Number.isFinite(longRunVariance) && longRunVariance >= 0).toBe(true);
      }),
    );
  });
  it("von Neumann's ratio lies between 0 and 4, whatever the series", () => {
    fc.assert(
      fc.property(series, (x) => {
        const { ratio } = vonNeumannRatio(x);
        expect(ratio).toBeGreaterThanOrEqual(0);
        expect(ratio).toBeLessThanOrEqual(4);
      }),
    );
  });
});

describe("constant, single, empty and non-finite series", () => {
  const constant = new Float64Array(20).fill(0.3);
  it("a constant has no spread, order 0, and counts as n independent samples", () => {
    expect(mean(constant)).toBe(0.3);
    expect(autoregression(constant)).toEqual({ order: 0, coefficients: [], innovationVariance: 0 });
    expect(effectiveSampleSize(constant)).toBe(20);
    expect(vonNeumannRatio(constant)).toEqual({ ratio: 2, z: 0 });
    expect(mser(constant)).toBe(0);
  });
  it("one sample has a mean and no variance", () => {
    expect(mean(of(7))).toBe(7);
    expect(() => variance(of(7))).toThrow(/1 samples/);
  });
  it("an empty series has no mean", () => expect(() => mean(of())).toThrow(/0 samples/));
  it.each([Number.NaN, Number.POSITIVE_INFINITY])("%s is refused with its place", (bad) => {
    const x = of(1, 2, bad, 4, 5, 6, 7, 8);
    for (const estimate of [mean, variance, mser, vonNeumannRatio, effectiveSampleSize])
      expect(() => estimate(x)).toThrow(expect.objectContaining({ code: "NON_FINITE", where: "sample 2" }));
    expect(() => batchMeans(x, 2)).toThrow(/NaN|Infinity/);
  });
});
