import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  type ComparedRun,
  combineHalfWidths,
  compareWithBaseline,
  type Difference,
  type Estimate,
  type Forcing,
  ratioInterval,
  sharedForcing,
} from "../../../../checks/compare/index.ts";
import { judgeRecord } from "../../../../checks/index.ts";
import { AppError } from "../../../../orchestrator/contract/index.ts";
import { autoregressive } from "../../../bench/stationarity/families/noise.ts";
import { randomStream } from "../../../bench/stationarity/random.ts";
import { seededNormal, seededUniform } from "../../../helpers/seeded.ts";

const noise = (n: number, seed: number, phi = 0.5) => autoregressive(phi).make(randomStream(seed), n);
const forcing: Forcing = {
  dtSeconds: 0.01,
  startSeconds: 0,
  drive: "circle of 4.5 m, wind 8 m/s",
  periods: [],
};
const compared = (
  samples: Float64Array,
  tolerance: number,
  more: Partial<ComparedRun> = {},
): ComparedRun => ({
  samples,
  forcing,
  judgement: judgeRecord(samples, { dt: 0.01, tolerance: { absolute: tolerance } }),
  ...more,
});
const estimate = (mean: number, halfWidth: number): Estimate => ({
  mean,
  halfWidth,
  confidence: 0.95,
  isBound: false,
});

describe("difference of histories that share their forcing", () => {
  const common = noise(4000, 811_230_017, 0.95);
  const own = noise(4000, 811_230_041);
  const baseline = compared(
    common.map((v) => 10 + v),
    1,
  );
  const run = compared(
    common.map((v, i) => 8 + v + 0.05 * own[i]!),
    1,
  );
  it("is known twenty times better than the means apart, since what they share cancels", () => {
    const found: Difference = compareWithBaseline(run, baseline);
    expect(found.way).toBe("sample by sample");
    expect(found.verdict).toBe("accepted");
    expect(Math.abs(found.mean! + 2)).toBeLessThan(found.halfWidth!);
    const apart = Math.hypot(run.judgement.halfWidth!, baseline.judgement.halfWidth!);
    expect(found.halfWidth! * 20).toBeLessThan(apart);
    expect(found.percent!.low).toBeLessThanOrEqual(-20);
    expect(found.percent!.high).toBeGreaterThanOrEqual(-20);
    expect(found.judgement!.window!.toIndex).toBe(4000);
    expect(found.differenceOfMeans!).toBeCloseTo(run.judgement.mean! - baseline.judgement.mean!, 12);
    expect(found.words).toMatch(/^−2\.00\d* ± .* % of the baseline .*; sample by sample, because step/);
  });
  it("keeps to the stretch that is sound in both", () => {
    const found = compareWithBaseline({ ...run, soundEnd: 3000 }, baseline);
    expect(found.judgement!.window!.toIndex).toBe(3000);
  });
  it("is exactly nothing for a run compared with itself, and says so", () => {
    const found = compareWithBaseline(baseline, baseline);
    expect([found.mean, found.halfWidth, found.percent!.value]).toEqual([0, 0, 0]);
    expect(found.words).toMatch(/not told from no difference/);
  });
  it("hands periods of both to the judge, and a tolerance in percent of the baseline", () => {
    const with36 = { ...forcing, periods: [{ name: "blade passing", steps: 36 }] };
    const asked: unknown[] = [];
    compareWithBaseline({ ...run, forcing: with36 }, baseline, {
      tolerance: { percent: 1 },
      judge: (x, options) => {
        asked.push(options.periods, options.tolerance);
        return judgeRecord(x, options);
      },
    });
    expect(asked[0]).toEqual([36]);
    expect((asked[1] as { absolute: number }).absolute).toBeCloseTo(baseline.judgement.mean! / 100, 12);
  });
  it("says drifting where the difference drifts, though no number is lost", () => {
    const drifting = compared(
      run.samples.map((v, i) => v + i / 4000),
      1,
    );
    const found = compareWithBaseline(drifting, baseline, { tolerance: { absolute: 0.05 } });
    expect(found.verdict).toBe("drifting");
    expect(found.words).toMatch(/^drifting, not to be used/);
  });
});

describe("where the difference needs longer by itself", () => {
  const a = compared(
    noise(4000, 811_230_081).map((v) => 5 + v),
    0.3,
  );
  const b = compared(
    noise(4000, 811_230_093).map((v) => 4 + v),
    0.3,
  );
  it("adds the half-widths of two accepted loads, which holds for any correlation", () => {
    const found = compareWithBaseline({ ...a, soundEnd: 150 }, b);
    expect(found.way).toBe("worst case");
    expect(found.verdict).toBe("accepted");
    expect(found.halfWidth!).toBeCloseTo(a.judgement.halfWidth! + b.judgement.halfWidth!, 12);
    expect(found.because).toMatch(/needs longer/);
  });
  it("does not pass off the sum as good enough for a tolerance that it misses", () => {
    const found = compareWithBaseline({ ...a, soundEnd: 150 }, b, { tolerance: { absolute: 0.1 } });
    expect(found.verdict).toBe("needs-longer");
    expect(found.way).toBe("sample by sample");
  });
});

describe("difference of histories that do not share their forcing", () => {
  const a = compared(
    noise(4000, 811_230_107).map((v) => 5 + v),
    0.3,
  );
  const b = compared(
    noise(4000, 811_230_119).map((v) => 4 + v),
    0.3,
    { forcing: { ...forcing, dtSeconds: 0.02 } },
  );
  it("combines independent half-widths and says why", () => {
    const found = compareWithBaseline(a, b);
    expect(found.way).toBe("independent");
    expect(found.because).toMatch(/time steps differ: 0\.01 s and 0\.02 s/);
    expect(found.halfWidth!).toBeCloseTo(Math.hypot(a.judgement.halfWidth!, b.judgement.halfWidth!), 12);
    expect(found.mean!).toBeCloseTo(a.judgement.mean! - b.judgement.mean!, 12);
    expect(found.percent!.value).toBeCloseTo((100 * found.mean!) / b.judgement.mean!, 10);
    expect(found.judgement).toBeNull();
  });
  it("takes the worse verdict of the two", () => {
    const short = { ...b, judgement: judgeRecord(b.samples, { dt: 0.02, tolerance: { absolute: 1e-3 } }) };
    expect(compareWithBaseline(a, short).verdict).toBe("needs-longer");
  });
  it("gives nothing where a run has no average", () => {
    const none = { ...b, judgement: judgeRecord(b.samples.subarray(0, 9), { dt: 0.02 }) };
    const found = compareWithBaseline(a, none);
    expect([found.mean, found.halfWidth, found.percent]).toEqual([null, null, null]);
    expect(found.words).toMatch(/no difference can be given/);
  });
  it("refuses half-widths of different confidences", () => {
    const other = { ...b, judgement: judgeRecord(b.samples, { dt: 0.02, confidence: 0.9 }) };
    expect(() => compareWithBaseline(a, other)).toThrow(/0\.95 and at 0\.9/);
  });
});

describe("shared forcing", () => {
  const blade = (steps: number) => ({ ...forcing, periods: [{ name: "blade passing", steps }] });
  it("needs equal step, start, path and wind, and one length of every shared period", () => {
    expect(sharedForcing(forcing, { ...forcing, startSeconds: 0.005 }).words).toMatch(/different times/);
    expect(sharedForcing(forcing, { ...forcing, drive: "straight" }).words).toMatch(/path or wind/);
    expect(sharedForcing(blade(36), blade(24)).words).toMatch(/blade passing differs: 36 and 24/);
    expect(sharedForcing(blade(36), blade(36))).toMatchObject({ shared: true, periods: blade(36).periods });
  });
  it("takes a period that only one of them carries as one of the difference", () => {
    expect(sharedForcing(forcing, blade(36))).toMatchObject({ shared: true, periods: blade(36).periods });
  });
});

describe("combined half-widths", () => {
  it("of 3 and 4 are 5 if independent, 7 if not, 7 if one is a bound", () => {
    expect(combineHalfWidths(estimate(1, 3), estimate(2, 4), true).halfWidth).toBe(5);
    expect(combineHalfWidths(estimate(1, 3), estimate(2, 4), false).halfWidth).toBe(7);
    const bound = { ...estimate(1, 3), isBound: true };
    expect(combineHalfWidths(bound, estimate(2, 4), true)).toMatchObject({ halfWidth: 7, rule: "sum" });
  });
  it("refuses a half-width that is not finite or negative", () => {
    for (const bad of [Number.NaN, Number.POSITIVE_INFINITY, -1])
      expect(() => combineHalfWidths(estimate(1, bad), estimate(1, 1), true)).toThrow(AppError);
  });
  it("cover the difference of two means with Student half-widths of 3 and 9 degrees of freedom at 95 % at least", () => {
    const normal = seededNormal(seededUniform(811_230_141));
    const t = { 4: 3.182446, 10: 2.262157 } as const; // 97.5 % points of Student's t for 3 and 9 (standard tables)
    const drawn = (n: 4 | 10, sd: number) => {
      const x = Array.from({ length: n }, () => sd * normal());
      const mean = x.reduce((sum, v) => sum + v, 0) / n;
      const variance = x.reduce((sum, v) => sum + (v - mean) ** 2, 0) / (n - 1);
      return estimate(mean, t[n] * Math.sqrt(variance / n));
    };
    const rounds = 20_000;
    for (const sd of [0.3, 1, 3]) {
      let held = 0;
      for (let i = 0; i < rounds; i++) {
        const [a, b] = [drawn(4, sd), drawn(10, 1)];
        if (Math.abs(a.mean - b.mean) <= combineHalfWidths(a, b, true).halfWidth) held += 1;
      }
      expect(held / rounds).toBeGreaterThan(0.95 - 3 * Math.sqrt((0.95 * 0.05) / rounds));
    }
  });
});

describe("ratio interval", () => {
  it("of 2 ± 0.2 over exactly 4 is 0.5 ± 0.05", () => {
    for (const independent of [true, false]) {
      const found = ratioInterval(estimate(2, 0.2), estimate(4, 0), independent)!;
      expect([found.ratio, found.low, found.high].map((v) => v.toFixed(12))).toEqual(
        [0.5, 0.45, 0.55].map((v) => v.toFixed(12)),
      );
    }
  });
  it("holds the two roots of Fieller's equation at its ends, and is wider for unknown correlation", () => {
    const size = fc.double({ min: -8, max: 8, noNaN: true });
    const share = fc.double({ min: 0, max: 0.9, noNaN: true });
    fc.assert(
      fc.property(size, fc.double({ min: 0, max: 3, noNaN: true }), share, (a, ha, hb) => {
        const [top, bottom] = [estimate(a, ha), estimate(-1, hb)];
        const found = ratioInterval(top, bottom, true)!;
        for (const q of [found.low, found.high]) {
          const scale = a * a + q * q + ha * ha;
          expect(Math.abs((a + q) ** 2 - (ha * ha + q * q * hb * hb))).toBeLessThanOrEqual(1e-12 * scale);
        }
        const any = ratioInterval(top, bottom, false)!;
        expect(any.low).toBeLessThanOrEqual(found.low + 1e-12 * (1 + Math.abs(found.low)));
        expect(any.high).toBeGreaterThanOrEqual(found.high - 1e-12 * (1 + Math.abs(found.high)));
      }),
      { seed: 811_230_163, numRuns: 500 },
    );
  });
  it("has no end where the denominator is not told from zero", () => {
    expect(ratioInterval(estimate(2, 0.1), estimate(0.1, 0.2), true)).toBeNull();
    expect(ratioInterval(estimate(2, 0.1), estimate(0, 0), false)).toBeNull();
  });
  it("covers the true ratio at 95 % although the denominator is known to 40 % only, where the delta method does not", () => {
    const normal = seededNormal(seededUniform(811_230_187));
    const z = 1.959964;
    const rounds = 20_000;
    let fieller = 0;
    let delta = 0;
    let anyway = 0;
    for (let i = 0; i < rounds; i++) {
      const [e, f] = [normal(), normal()];
      const a = estimate(3 + 0.2 * e, 0.2 * z);
      const b = estimate(1 + 0.2 * f, 0.2 * z);
      // Fully correlated against each other: the worst case for the difference.
      const c = estimate(3 - 0.6 * f, 0.6 * z);
      const holds = (found: { low: number; high: number } | null) =>
        found === null || (found.low <= 3 && 3 <= found.high);
      if (holds(ratioInterval(a, b, true))) fieller += 1;
      const q = a.mean / b.mean;
      if (Math.abs(q - 3) <= (z * 0.2 * Math.hypot(1, q)) / Math.abs(b.mean)) delta += 1;
      if (holds(ratioInterval(c, b, false))) anyway += 1;
    }
    const margin = 3 * Math.sqrt((0.95 * 0.05) / rounds);
    expect(Math.abs(fieller / rounds - 0.95)).toBeLessThan(0.004 + margin);
    expect(anyway / rounds).toBeGreaterThan(0.95 - margin);
    expect(delta / rounds).toBeLessThan(0.95 - margin);
  });
});
