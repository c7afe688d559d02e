import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { cycleMeans, findPeriod, movingAverage, resample } from "../../../../checks/index.ts";
import { randomStream } from "../../../bench/stationarity/random.ts";

const wave = (n: number, period: number, phase = 0) =>
  Float64Array.from({ length: n }, (_, i) => 3 + Math.sin((2 * Math.PI * i) / period + phase));

describe("cycle means", () => {
  it("of 0, 1, 2, 3, 4 over a period of 2 are 1 and 3, anchored at the end", () => {
    const { means, first } = cycleMeans(Float64Array.of(0, 1, 2, 3, 4), 2);
    expect([...means]).toEqual([1, 3]);
    expect(first).toBe(0);
  });
  it("over 1.5 times two samples of a ramp take the mean of the ramp over that stretch", () => {
    const { means, first } = cycleMeans(Float64Array.of(0, 1, 2, 3), 2.5);
    expect(means[0]).toBeCloseTo(1.75, 14);
    expect(first).toBeCloseTo(0.5, 14);
  });
  it("of a wave are its level whatever phase and (non-integer) period", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 12, max: 60, noNaN: true }),
        fc.double({ min: 0, max: 6, noNaN: true }),
        (period, phase) => {
          const { means } = cycleMeans(wave(700, period, phase), period);
          // Straight lines between samples cut the crests by (2π/P)²/12 at most, and that only in part.
          for (const m of means)
            expect(Math.abs(m - 3)).toBeLessThan(((2 * Math.PI) / period) ** 2 / 12 / period);
        },
      ),
    );
  });
  it("refuse a period that does not fit", () => {
    expect(() => cycleMeans(wave(20, 8), 30)).toThrow(/a period of 30 samples .* series of 20/);
    expect(() => cycleMeans(wave(20, 8), 1)).toThrow(
      expect.objectContaining({ fix: expect.stringContaining("at least 2") }),
    );
  });
});

describe("period finding", () => {
  it.each([
    [36, 2000],
    [31.7, 1500],
    [4.5, 800],
    [150, 1000],
  ])(
    "finds %d samples within a hundredth of a bin in %d samples with noise of half the height",
    (period, n) => {
      const random = randomStream(period * 1000 + n);
      const x = wave(n, period, 1).map((v) => v + 0.35 * random.normal());
      const found = findPeriod(x);
      expect(found).not.toBeNull();
      expect(Math.abs(n / found! - n / period)).toBeLessThan(0.1);
    },
  );
  it("finds the whole revolution where every second blade differs", () => {
    const x = Float64Array.from(
      { length: 2000 },
      (_, i) => Math.sin((2 * Math.PI * i) / 20) + 0.2 * Math.sin((2 * Math.PI * i) / 40),
    );
    expect(findPeriod(x)! / 40).toBeCloseTo(1, 3);
  });
  it("finds a slow period beyond the longest transform", () => {
    expect(findPeriod(wave(400_000, 60_000))! / 60_000).toBeCloseTo(1, 2);
  });
  it("finds none in white noise, in a red one, in a ramp, in a constant, in very few samples", () => {
    const random = randomStream(77_001);
    let v = 0;
    const red = Float64Array.from({ length: 3000 }, () => {
      v = 0.97 * v + random.normal();
      return v;
    });
    const white = Float64Array.from({ length: 3000 }, () => random.normal());
    const ramp = Float64Array.from({ length: 3000 }, (_, i) => i);
    for (const x of [white, red, ramp, new Float64Array(3000).fill(2), wave(12, 4)])
      expect(findPeriod(x)).toBeNull();
  });
  it("refuses values that are no numbers", () => {
    expect(() => findPeriod(wave(100, 10).fill(Number.NaN, 50, 51))).toThrow(
      expect.objectContaining({ code: "NON_FINITE" }),
    );
  });
});

it("a moving average over 2 samples of 0, 1, 4, 9 … is (0/2 + 1 + 4/2)/2 at first", () => {
  const x = Float64Array.from({ length: 12 }, (_, i) => i * i);
  const { values, first } = movingAverage(x, 2);
  expect(first).toBe(1);
  expect(values[0]).toBeCloseTo((0.5 * 0 + 1 + 0.5 * 4) / 2, 14);
  expect(values).toHaveLength(10);
});

describe("resampling", () => {
  it("of 0, 2, 3 at times 0, 2, 3 to steps of one gives 0, 1, 2, 3", () => {
    const t = Float64Array.of(0, 2, 3);
    expect([...resample(t, t, 1)]).toEqual([0, 1, 2, 3]);
  });
  it("keeps samples that lie on the new grid", () => {
    const x = wave(50, 9);
    const t = Float64Array.from(x, (_, i) => i / 4);
    expect([...resample(t, x, 0.25)]).toEqual([...x]);
  });
  it("refuses a step of zero", () =>
    expect(() => resample(Float64Array.of(0, 1), Float64Array.of(1, 1), 0)).toThrow(/step/));
});
