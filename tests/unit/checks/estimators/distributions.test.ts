import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  incompleteBeta,
  linearRegression,
  studentTCdf,
  studentTQuantile,
  welchTest,
} from "../../../../checks/index.ts";

const of = (...values: number[]) => Float64Array.of(...values);

describe("Student's t", () => {
  it("with one degree of freedom is Cauchy's: P(T <= 1) = 3/4", () => {
    expect(studentTCdf(1, 1)).toBeCloseTo(0.75, 14);
    expect(studentTQuantile(0.75, 1)).toBeCloseTo(1, 13);
  });
  it("with two degrees of freedom is (1 + t/sqrt(2 + t²))/2", () => {
    for (const t of [-30, -2, -0.1, 0.3, 4]) {
      const exact =
        t < 0 ? 1 / (2 + t * t) / (1 - t / Math.sqrt(2 + t * t)) : 0.5 * (1 + t / Math.sqrt(2 + t * t));
      expect(Math.abs(studentTCdf(t, 2) / exact - 1)).toBeLessThan(1e-13);
    }
  });
  it("quantile and distribution function undo each other to 1e-10", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-8, max: 0.5, noNaN: true }),
        fc.double({ min: 1, max: 500, noNaN: true }),
        (p, df) => {
          expect(Math.abs(studentTCdf(studentTQuantile(p, df), df) / p - 1)).toBeLessThan(1e-10);
        },
      ),
    );
  });
  it("is symmetric, and NaN where it has no meaning", () => {
    expect(studentTQuantile(0.9, 7)).toBe(-studentTQuantile(1 - 0.9, 7));
    expect(studentTQuantile(0.5, 3)).toBe(0);
    expect(studentTQuantile(0, 3)).toBe(Number.NEGATIVE_INFINITY);
    expect(studentTCdf(Number.POSITIVE_INFINITY, 3)).toBe(1);
    for (const value of [
      studentTCdf(Number.NaN, 3),
      studentTCdf(1, 0),
      studentTQuantile(1.1, 3),
      studentTQuantile(0.2, -1),
    ])
      expect(value).toBeNaN();
  });
});

describe("incomplete beta function", () => {
  it("is x for a = b = 1, and x^a for b = 1", () => {
    expect(incompleteBeta(0.3, 1, 1)).toBeCloseTo(0.3, 14);
    expect(incompleteBeta(0.3, 3, 1)).toBeCloseTo(0.027, 14);
  });
  it("mirrors: I_x(a, b) = 1 − I_{1−x}(b, a)", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.integer({ min: 1, max: 80 }),
        fc.integer({ min: 1, max: 80 }),
        (x, a, b) => {
          expect(incompleteBeta(x, a / 2, b / 2)).toBeCloseTo(1 - incompleteBeta(1 - x, b / 2, a / 2), 11);
        },
      ),
    );
  });
  it("is NaN out of range", () => expect(incompleteBeta(1.2, 1, 1)).toBeNaN());
});

describe("straight line", () => {
  it("through 0, 1, 1, 2 at 0..3: slope 0.6, intercept 0.1, residual variance 0.1", () => {
    const line = linearRegression(of(0, 1, 2, 3), of(0, 1, 1, 2));
    expect(line.slope).toBeCloseTo(0.6, 14);
    expect(line.intercept).toBeCloseTo(0.1, 14);
    expect(line.residualVariance).toBeCloseTo(0.1, 14);
    expect(line.slopeSe).toBeCloseTo(Math.sqrt(0.1 / 5), 14);
  });
  it("refuses a regressor that does not vary", () => {
    expect(() => linearRegression(of(2, 2, 2), of(1, 2, 3))).toThrow(/vary/);
  });
  it("calls a flat series flat", () =>
    expect(linearRegression(of(0, 1, 2), of(5, 5, 5))).toMatchObject({ slope: 0, t: 0, p: 1 }));
});

describe("Welch's test", () => {
  it("of two equal constants finds nothing, of two unequal ones everything", () => {
    expect(welchTest(of(1, 1), of(1, 1)).p).toBe(1);
    expect(welchTest(of(1, 1), of(2, 2))).toMatchObject({ p: 0, t: Number.POSITIVE_INFINITY });
  });
  it("with equal sizes and variances is the two-sample t test: 1,2,3 against 2,3,4 gives t = sqrt(3/2), 4 degrees", () => {
    const { t, df } = welchTest(of(1, 2, 3), of(2, 3, 4));
    expect(t).toBeCloseTo(Math.sqrt(1.5), 14);
    expect(df).toBeCloseTo(4, 12);
  });
});
