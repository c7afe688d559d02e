import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  type CycleCount,
  damageEquivalentAmplitude,
  rainflow,
  turningPoints,
} from "../../../../checks/compare/index.ts";
import { AppError } from "../../../../orchestrator/contract/index.ts";

const series = fc
  .array(fc.integer({ min: -50, max: 50 }), { minLength: 0, maxLength: 80 })
  .map((values) => Float64Array.from(values));
const both: CycleCount["residue"][] = ["half cycles", "repeating"];

describe("turning points", () => {
  it("of 1 2 2 3 1 1 0 2 are 1 3 0 2", () => {
    expect(turningPoints(Float64Array.of(1, 2, 2, 3, 1, 1, 0, 2))).toEqual(Float64Array.of(1, 3, 0, 2));
  });
  it("of nothing are nothing, of a constant one value", () => {
    expect(turningPoints(new Float64Array(0)).length).toBe(0);
    expect(turningPoints(new Float64Array(9).fill(4))).toEqual(Float64Array.of(4));
  });
});

describe("rainflow", () => {
  it("counts k periods of a sine as k cycles of twice its amplitude when it repeats", () => {
    const x = Float64Array.from({ length: 360 }, (_, i) => 3 * Math.sin((2 * Math.PI * i) / 36));
    const counted = rainflow(x, "repeating");
    expect(counted.total).toBe(10);
    for (const { range } of counted.cycles) expect(range).toBeCloseTo(6, 12);
  });
  it("counts a single rise as half a cycle, or as one if it repeats", () => {
    expect(rainflow(Float64Array.of(0, 1, 4)).cycles).toEqual([{ range: 4, mean: 2, count: 0.5 }]);
    expect(rainflow(Float64Array.of(0, 1, 4), "repeating").cycles).toEqual([{ range: 4, mean: 2, count: 1 }]);
  });
  it("counts nothing in a constant, a single sample and an empty series", () => {
    for (const n of [0, 1, 5]) expect(rainflow(new Float64Array(n).fill(2)).cycles).toEqual([]);
    for (const n of [0, 1, 5]) expect(rainflow(new Float64Array(n).fill(2), "repeating").cycles).toEqual([]);
  });
  it("names the sample that is not finite", () => {
    expect(() => rainflow(Float64Array.of(1, 2, Number.NaN))).toThrow(/sample 2 is NaN/);
  });
  it("accounts for every way up and down: twice the counted ranges are the total variation", () => {
    fc.assert(
      fc.property(series, (x) => {
        const variation = x.subarray(1).reduce((sum, value, i) => sum + Math.abs(value - x[i]!), 0);
        const closing = x.length === 0 ? 0 : Math.abs(x[0]! - x.at(-1)!);
        const counted = (residue: CycleCount["residue"]) =>
          2 * rainflow(x, residue).cycles.reduce((sum, { range, count }) => sum + range * count, 0);
        expect(counted("half cycles")).toBe(variation);
        expect(counted("repeating")).toBe(variation + closing);
      }),
      { seed: 733_190_021, numRuns: 500 },
    );
  });
  it("always holds the largest range, and does not care which way up the history is", () => {
    fc.assert(
      fc.property(series, fc.constantFrom(...both), (x, residue) => {
        const cycles = rainflow(x, residue).cycles;
        const largest = Math.max(0, ...cycles.map((cycle) => cycle.range));
        expect(largest).toBe(x.length === 0 ? 0 : Math.max(...x) - Math.min(...x));
        const ranges = (counted: CycleCount) =>
          counted.cycles.map(({ range, count }) => `${range}x${count}`).sort();
        const upsideDown = x.map((value) => -value);
        expect(ranges(rainflow(upsideDown, residue))).toEqual(ranges(rainflow(x, residue)));
      }),
      { seed: 733_190_043, numRuns: 300 },
    );
  });
  it("counts a repeating history alike wherever it is cut", () => {
    fc.assert(
      fc.property(series, fc.nat(79), (x, at) => {
        const cut = x.length === 0 ? 0 : at % x.length;
        const turned = Float64Array.from([...x.subarray(cut), ...x.subarray(0, cut)]);
        const ranges = (y: Float64Array) =>
          rainflow(y, "repeating")
            .cycles.map((cycle) => cycle.range)
            .sort((a, b) => a - b);
        expect(ranges(turned)).toEqual(ranges(x));
      }),
      { seed: 733_190_067, numRuns: 500 },
    );
  });
});

describe("damage-equivalent amplitude", () => {
  const equal = rainflow(Float64Array.of(0, 4, 0, 4, 0, 4, 0), "repeating");
  it("of equal cycles is their own amplitude, at any slope, when the reference is their number", () => {
    for (const slope of [1, 3, 10, 400])
      expect(damageEquivalentAmplitude(equal, { slope, equivalentCycles: 3 }).amplitude).toBeCloseTo(2, 12);
  });
  it("falls by 2^(1/m) when twice as many cycles stand for it, and says to how many it refers", () => {
    const found = damageEquivalentAmplitude(equal, { slope: 4, equivalentCycles: 6 });
    expect(found.amplitude).toBeCloseTo(2 / 2 ** 0.25, 12);
    expect(found.words).toMatch(/3 counted cycles in 6 equal ones \(slope 4/);
  });
  it("is nothing for no cycles", () => {
    const none = rainflow(new Float64Array(3));
    expect(damageEquivalentAmplitude(none, { slope: 3, equivalentCycles: 1 }).amplitude).toBe(0);
  });
  it("does not overflow or vanish for large and small loads", () => {
    for (const size of [2 ** 900, 2 ** -900]) {
      const counted = rainflow(Float64Array.of(0, size, 0), "repeating");
      const { range } = damageEquivalentAmplitude(counted, { slope: 12, equivalentCycles: 1 });
      expect(range / size).toBeCloseTo(1, 12);
    }
  });
  it("refuses a slope below one and a reference of nothing", () => {
    for (const bad of [
      { slope: 0.5, equivalentCycles: 1 },
      { slope: 3, equivalentCycles: 0 },
      { slope: Number.NaN, equivalentCycles: 1 },
    ])
      expect(() => damageEquivalentAmplitude(equal, bad)).toThrow(AppError);
  });
});
