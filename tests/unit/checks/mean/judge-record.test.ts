import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  essentialPeriods,
  type JudgeOptions,
  judgeRecord,
  nextLookLength,
} from "../../../../checks/index.ts";
import { autoregressive } from "../../../bench/stationarity/families/noise.ts";
import { randomStream } from "../../../bench/stationarity/random.ts";

const noise = (n: number, seed: number, phi = 0.5) => autoregressive(phi).make(randomStream(seed), n);
const options: JudgeOptions = { dt: 0.01, tolerance: { absolute: 0.3 } };
const judge = (x: Float64Array, more: Partial<JudgeOptions> = {}) => judgeRecord(x, { ...options, ...more });

describe("a sound record", () => {
  const x = noise(4000, 90_210_017).map((v) => v + 5);
  it("is accepted, with window, half-width below the tolerance, and words", () => {
    const judged = judge(x);
    expect(judged.verdict).toBe("accepted");
    expect(Math.abs(judged.mean! - 5)).toBeLessThan(judged.halfWidth!);
    expect(judged.halfWidth!).toBeLessThanOrEqual(0.3);
    expect(judged.window).toMatchObject({ toIndex: 4000, toTime: 39.99 });
    expect(judged.tests.every((test) => test.passed || test.name === "variance")).toBe(true);
    expect(judged.words).toMatch(/^accepted: /);
    expect(judged.samplesNeeded).toBeNull();
  });
  it("needs longer at a tighter tolerance, and says how much", () => {
    const judged = judge(x, { tolerance: { absolute: 0.01 } });
    expect(judged.verdict).toBe("needs-longer");
    expect(judged.samplesNeeded![0]).toBeGreaterThanOrEqual(5000);
    expect(judged.samplesNeeded![1]).toBeLessThanOrEqual(16_000);
    expect(judged.words).toMatch(/is allowed/);
  });
  it("is held against 1 % of the mean where no tolerance is asked for, and says so", () => {
    const judged = judge(x, { tolerance: null });
    expect(judged.tolerance!).toBeCloseTo(Math.abs(judged.mean!) / 100, 12);
    expect(judged.words).toMatch(/no tolerance was asked for: 1 % of the mean/);
  });
  it("is not accepted before the shortest record asked for", () => {
    const judged = judge(x, { samplesMin: 4001 });
    expect(judged.verdict).toBe("needs-longer");
    expect(judged.words).toMatch(/4000 of the 4001 samples/);
  });
  it("is known better when restarted from developed flow, since no start-up has to be feared", () => {
    expect(judge(x, { fromDeveloped: true }).halfWidth!).toBeLessThan(judge(x).halfWidth!);
  });
  it("takes its window's times from the times given", () => {
    const times = Float64Array.from(x, (_, i) => 7 + i);
    expect(judge(x, { times }).window!.toTime).toBe(4006);
  });
  it("scales: twice the channel, twice the tolerance, twice the mean and half-width", () => {
    const one = judge(x);
    const two = judge(
      x.map((v) => 2 * v),
      { tolerance: { absolute: 0.6 } },
    );
    expect(two.mean).toBe(2 * one.mean!);
    expect(two.halfWidth).toBe(2 * one.halfWidth!);
  });
  it("does not change the samples", () => {
    const copy = x.slice();
    judge(x, { periods: [20, 7.3] });
    expect(x).toEqual(copy);
  });
});

describe("a record that must not be accepted", () => {
  it("drifts: the words say so", () => {
    const judged = judge(noise(4000, 31_337_001).map((v, i) => v + 0.001 * i));
    expect(judged.verdict).toBe("drifting");
    expect(judged.words).toMatch(/^drifting: .*over the window/);
    expect(judged.samplesNeeded).toBeNull();
    expect(judged.hiddenDrift!).toBeGreaterThan(1);
  });
  it("is still in its start-up", () => {
    const judged = judge(noise(3000, 70_000_123).map((v, i) => v * 0.05 - 8 * Math.exp(-i / 1500)));
    expect(judged.verdict).toBe("needs-longer");
  });
  it("is worth too few independent samples", () => {
    const judged = judge(noise(1500, 88_100_021, 0.995), { tolerance: { absolute: 5 } });
    expect(judged.verdict).not.toBe("accepted");
    expect(judged.tests.find((test) => test.name === "effective-samples")!.passed).toBe(false);
  });
  it("holds fewer than eight cycles of its period", () => {
    const judged = judge(noise(1000, 99_000_007), { periods: [140] });
    expect(judged.verdict).toBe("needs-longer");
    expect(judged.words).toMatch(/7.14 periods of 140 samples; 8 are the least/);
    expect(judged.samplesNeeded![0]).toBeGreaterThanOrEqual(1121);
  });
});

describe("records without noise", () => {
  const wave = (n: number, tail: (i: number) => number) =>
    Float64Array.from({ length: n }, (_, i) => 0.45 + 0.05 * Math.sin((2 * Math.PI * i) / 18) + tail(i));
  it("a clean oscillation is bounded, not estimated", () => {
    const judged = judge(
      wave(720, () => 0),
      { periods: [18], tolerance: { percent: 0.5 } },
    );
    expect(judged.verdict).toBe("accepted");
    expect(Math.abs(judged.mean! - 0.45)).toBeLessThanOrEqual(judged.halfWidth!);
    expect(judged.halfWidth!).toBeGreaterThan(0);
    expect(judged.effectiveSamples).toBeNull();
    expect(judged.period).toMatchObject({ samples: 18, source: "declared" });
  });
  it("one that relaxes within 12 of 40 revolutions is accepted, and its window leaves the relaxation out", () => {
    const judged = judge(
      wave(721, (i) => -0.2 * Math.exp(-i / 32)),
      { periods: [18], tolerance: { percent: 0.5 } },
    );
    expect(judged.verdict).toBe("accepted");
    expect(judged.window!.fromIndex).toBeGreaterThan(100);
    expect(Math.abs(judged.mean! - 0.45)).toBeLessThanOrEqual(judged.halfWidth!);
  });
  it("eleven revolutions of it are too few", () => {
    const judged = judge(
      wave(199 + 1, (i) => -0.2 * Math.exp(-i / 32)),
      { periods: [18], tolerance: { percent: 0.5 } },
    );
    expect(judged.verdict).toBe("needs-longer");
  });
  it("whatever the pace of an exponential relaxation, what is accepted covers the limit", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 5, max: 5000, noNaN: true }),
        fc.double({ min: 0.0005, max: 0.5, noNaN: true }),
        (tau, height) => {
          const judged = judge(
            wave(900, (i) => height * Math.exp(-i / tau)),
            { periods: [18], tolerance: { percent: 0.5 } },
          );
          if (judged.verdict === "accepted")
            expect(Math.abs(judged.mean! - 0.45)).toBeLessThanOrEqual(judged.tolerance!);
        },
      ),
      { seed: 20_261_201, numRuns: 300 },
    );
  });
  it("a constant has half-width zero", () => {
    expect(judge(new Float64Array(300).fill(0.3125))).toMatchObject({
      verdict: "accepted",
      mean: 0.3125,
      halfWidth: 0,
    });
  });
});

describe("refusals", () => {
  it.each([Number.NaN, Number.POSITIVE_INFINITY])("%s fails, with its place", (bad) => {
    const x = noise(500, 12_345_671);
    x[321] = bad;
    expect(judge(x)).toMatchObject({
      verdict: "failed",
      mean: null,
      words: expect.stringContaining("sample 321"),
    });
  });
  it.each([0, 1, 199])("%d samples need longer", (n) => {
    expect(judge(new Float64Array(n).fill(1))).toMatchObject({ verdict: "needs-longer", mean: null });
  });
  it("names what it can't judge with", () => {
    const x = new Float64Array(300);
    expect(() => judge(x, { dt: 0 })).toThrow(/time step of 0/);
    expect(() => judge(x, { confidence: 1 })).toThrow(/confidence of 1/);
    expect(() => judge(x, { tolerance: { percent: -1 } })).toThrow(/tolerance of -1/);
    expect(() => judge(x, { periods: [Number.NaN] })).toThrow(/period of NaN/);
  });
  it("says that a percentage of a mean near zero can't be met", () => {
    const judged = judge(noise(1000, 65_432_101), { tolerance: { percent: 1 } });
    expect(judged.warnings).toContain("mean-near-zero");
    expect(judged.words).toMatch(/absolute tolerance/);
  });
});

describe("looks", () => {
  it("come at 200, 224, 251, 282 samples, from wherever one asks", () => {
    expect([0, 199, 200, 223, 224, 251].map(nextLookLength)).toEqual([200, 200, 224, 224, 251, 282]);
  });
  it("do not depend on where one asks between two of them", () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1_000_000 }), (length) => {
        const next = nextLookLength(length);
        expect(next).toBeGreaterThan(length);
        expect(nextLookLength(next - 1)).toBe(next);
      }),
    );
  });
});

it("periods: fractions of longer ones and what is shorter than two samples go, incommensurate ones stay", () => {
  expect(essentialPeriods([9, 18, 7, 18, 1.5, 3.6])).toEqual([18, 7]);
});
