import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  confidenceOfFamily,
  confidencePerChannel,
  estimateOf,
  holmAdjusted,
  type UncertaintyBudget,
  uncertaintyBudget,
} from "../../../../checks/compare/index.ts";
import { judgeRecord } from "../../../../checks/index.ts";
import { AppError } from "../../../../orchestrator/contract/index.ts";
import { seededNormal, seededUniform } from "../../../helpers/seeded.ts";

describe("confidence of a family of channels", () => {
  it("is 0.95 for five channels at 0.99 each by Bonferroni, 0.98979 each by Šidák", () => {
    expect(confidencePerChannel(0.95, 5)).toBeCloseTo(0.99, 15);
    expect(confidencePerChannel(0.95, 5, "sidak")).toBeCloseTo(0.95 ** 0.2, 15);
    expect(confidenceOfFamily(0.99, 5)).toBeCloseTo(0.95, 14);
    expect(confidenceOfFamily(0.95, 30)).toBe(0);
  });
  it("is the channel's own for one channel", () => {
    for (const rule of ["bonferroni", "sidak"] as const) {
      expect(confidencePerChannel(0.9, 1, rule)).toBeCloseTo(0.9, 15);
      expect(confidenceOfFamily(0.9, 1, rule)).toBeCloseTo(0.9, 15);
    }
  });
  it("inverts, and Bonferroni asks for more than Šidák", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.5, max: 0.9999, noNaN: true }),
        fc.integer({ min: 1, max: 500 }),
        (c, m) => {
          expect(confidenceOfFamily(confidencePerChannel(c, m), m)).toBeCloseTo(c, 10);
          expect(confidenceOfFamily(confidencePerChannel(c, m, "sidak"), m, "sidak")).toBeCloseTo(c, 10);
          expect(confidencePerChannel(c, m)).toBeGreaterThanOrEqual(
            confidencePerChannel(c, m, "sidak") - 1e-15,
          );
        },
      ),
      { seed: 419_220_031 },
    );
  });
  it("refuses confidences of 0 and 1 and half a channel", () => {
    for (const [c, m] of [
      [0, 2],
      [1, 2],
      [0.95, 0],
      [0.95, 1.5],
    ] as const)
      expect(() => confidencePerChannel(c, m)).toThrow(AppError);
  });
});

describe("Holm's rule", () => {
  it("turns 0.01, 0.04, 0.03, 0.005 into 0.03, 0.06, 0.06, 0.02, worked by hand", () => {
    const adjusted = holmAdjusted([0.01, 0.04, 0.03, 0.005]);
    [0.03, 0.06, 0.06, 0.02].forEach((value, i) => {
      expect(adjusted[i]!).toBeCloseTo(value, 14);
    });
  });
  it("lies between the p-value itself and Bonferroni's", () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { maxLength: 30 }), (p) => {
        const adjusted = holmAdjusted(p);
        for (const [i, value] of p.entries()) {
          expect(adjusted[i]!).toBeGreaterThanOrEqual(value);
          expect(adjusted[i]!).toBeLessThanOrEqual(Math.min(1, p.length * value));
        }
      }),
      { seed: 419_220_057 },
    );
  });
  it("calls something real in at most about 5 % of families of ten nothings (2000 families, 3 standard errors)", () => {
    const uniform = seededUniform(419_220_077);
    let wrong = 0;
    for (let i = 0; i < 2000; i++)
      if (holmAdjusted(Array.from({ length: 10 }, uniform)).some((p) => p <= 0.05)) wrong += 1;
    expect(wrong / 2000).toBeLessThan(0.05 + 3 * Math.sqrt((0.05 * 0.95) / 2000));
    expect(wrong).toBeGreaterThan(0);
  });
  it("refuses what is no probability", () => {
    expect(() => holmAdjusted([0.2, Number.NaN])).toThrow(AppError);
  });
});

describe("uncertainty budget", () => {
  const load = { mean: 0.45, halfWidth: 0.002, confidence: 0.95, isBound: false };
  const wake = { source: "wake length", from: "companion difference", amount: -0.003 } as const;
  it("adds its lines and keeps them apart", () => {
    const budget: UncertaintyBudget = uncertaintyBudget(load, [
      wake,
      { source: "time step", from: "grid convergence index", amount: 0.0005 },
    ]);
    expect(budget.total).toBeCloseTo(0.0055, 15);
    expect(budget.complete).toBe(true);
    expect(budget.entries.map((e) => [e.label, e.kind, e.amount, e.signed])).toEqual([
      ["statistical", "statistical", 0.002, null],
      ["wake length", "systematic", 0.003, -0.003],
      ["time step", "systematic", 0.0005, null],
    ]);
    expect(budget.words).toMatch(/no confidence interval/);
  });
  it("counts a difference that the comparison can't tell from none as what it resolves", () => {
    const budget = uncertaintyBudget(load, [{ ...wake, amount: 0.0001, resolvedTo: 0.004 }]);
    expect(budget.total).toBeCloseTo(0.006, 15);
    expect(budget.entries[1]!.words).toMatch(/resolves 0\.004/);
  });
  it("says at least where something was not examined", () => {
    const budget = uncertaintyBudget(load, [wake, { source: "strips", from: "not examined", amount: null }]);
    expect(budget.complete).toBe(false);
    expect(budget.words).toMatch(/^at least ±0\.005: strips not examined/);
  });
  it("says that the half-width of a record at rest is a bound", () => {
    expect(uncertaintyBudget({ ...load, isBound: true }, []).entries[0]!.words).toMatch(/bound/);
  });
  it("refuses amounts that are not finite, missing or invented", () => {
    for (const bad of [
      { ...wake, amount: Number.NaN },
      { ...wake, amount: null },
      { source: "strips", from: "not examined", amount: 0.1 } as const,
    ])
      expect(() => uncertaintyBudget(load, [bad])).toThrow(AppError);
  });
});

describe("estimate of a judgement", () => {
  it("tells a bound from a statistic, and is null where there is neither", () => {
    const normal = seededNormal(seededUniform(419_220_091));
    const noisy = Float64Array.from({ length: 4000 }, () => 5 + normal());
    const atRest = Float64Array.from({ length: 4000 }, (_, i) => 5 + Math.exp(-i / 20));
    const judge = (x: Float64Array) => estimateOf(judgeRecord(x, { dt: 1, tolerance: { absolute: 0.2 } }));
    expect(judge(noisy)!.isBound).toBe(false);
    expect(judge(atRest)).toMatchObject({ isBound: true, mean: expect.closeTo(5, 3) });
    expect(judge(noisy.subarray(0, 10))).toBeNull();
    expect(judge(new Float64Array(4000).fill(3))).toMatchObject({ halfWidth: 0, isBound: false });
  });
});
