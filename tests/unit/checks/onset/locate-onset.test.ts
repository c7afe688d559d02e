import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { locateAfterAlarm, locateOnset } from "../../../../checks/onset/index.ts";
import { trustedEnd } from "../../../../checks/onset/trusted-end.ts";
import { seededNormal, seededUniform } from "../../../helpers/seeded.ts";

const N = 1500;
const options = { periodsSteps: [], plannedSteps: N };

function noisy(seed: number, change: (t: number) => number): Float64Array {
  const normal = seededNormal(seededUniform(seed));
  return Float64Array.from({ length: N }, (_, t) => 1 + 0.01 * normal() + change(t));
}

function find(x: Float64Array, dt = 1) {
  const times = Float64Array.from(x, (_, t) => t * dt);
  return locateOnset({ times, channels: { CN: x } }, options);
}

const wave = (t: number) => Math.SQRT2 * Math.sin(t / 2.3);

describe("what an onset says", () => {
  it("has index, time, band, rate, guard and a sentence for a growing oscillation", () => {
    const { onset } = find(
      noisy(52_525_252, (t) => 0.01 * Math.exp(Math.min(0.03 * (t - 900), 9)) * wave(t)),
      0.002,
    );
    expect(onset).toMatchObject({ kind: "growing-oscillation", channel: "CN", channelsAgreeing: ["CN"] });
    // One e-fold is 33 steps; half of one is asked for.
    expect(Math.abs(onset!.index! - 900)).toBeLessThan(17);
    expect(onset!.time).toBeCloseTo(0.002 * onset!.index!, 12);
    expect(onset!.band![0]).toBeLessThanOrEqual(900);
    expect(onset!.band![1]).toBeGreaterThanOrEqual(900);
    expect(Math.abs(onset!.growthPerStep! - 0.03)).toBeLessThan(0.003);
    // Three e-folds of guard before the band.
    expect(onset!.trustedEndIndex!).toBeLessThanOrEqual(onset!.band![0] - 90);
    expect(onset!.words).toMatch(/^CN oscillates with growing amplitude from sample \d+ on \(t = 1\.\d+\)/);
    expect(onset!.words).toContain(`Samples before ${onset!.trustedEndIndex} may still be averaged.`);
  });

  it("is null with no notes for sound noise", () => {
    expect(find(noisy(53_535_353, () => 0))).toEqual({ onset: null, notes: [] });
  });

  it("moves with a power of two and stays where it is", () => {
    const x = noisy(54_545_454, (t) => (t < 800 ? 0 : 0.04 * wave(t * 1.7)));
    const plain = find(x).onset;
    fc.assert(
      fc.property(fc.integer({ min: -100, max: 100 }), (power) => {
        expect(find(x.map((v) => v * 2 ** power)).onset).toEqual(plain);
      }),
      { seed: 31, numRuns: 10 },
    );
  });

  it("names the channels that agree, the first one first", () => {
    const grow = (t: number) => 0.01 * Math.exp(Math.min(0.03 * (t - 900), 9)) * wave(t);
    const channels = {
      CT: noisy(56_565_656, grow),
      CP: noisy(57_575_757, grow),
      CQ: noisy(58_585_858, () => 0),
    };
    const { onset } = locateOnset(
      { times: Float64Array.from({ length: N }, (_, t) => t), channels },
      options,
    );
    expect(onset!.channelsAgreeing.toSorted()).toEqual(["CP", "CT"]);
    expect(onset!.words).toContain("2 channels show it.");
  });
});

describe("kinds", () => {
  it("places a non-finite value exactly, with two blocks of guard", () => {
    const x = noisy(59_595_959, () => 0);
    x[700] = Number.NaN;
    expect(find(x).onset).toMatchObject({
      kind: "non-finite",
      index: 700,
      band: [700, 700],
      alarmIndex: 700,
      growthPerStep: null,
      trustedEndIndex: 660,
    });
  });

  it("calls a fast growth that ends in a non-finite value by its growth", () => {
    const x = noisy(60_606_060, (t) => 0.01 * Math.exp(0.25 * (t - 800)));
    x.fill(Number.POSITIVE_INFINITY, 835);
    const { onset } = find(x);
    expect(onset!.kind).toBe("blow-up");
    expect(Math.abs(onset!.index! - 800)).toBeLessThan(10);
    expect(onset!.trustedEndIndex!).toBeLessThan(790);
  });

  it("leaves both sides of a shift of the mean to be averaged", () => {
    const { onset, notes } = find(noisy(61_616_161, (t) => (t < 800 ? 0 : 0.08)));
    expect(onset).toMatchObject({
      kind: "mean-shift",
      index: 800,
      growthPerStep: null,
      trustedEndIndex: null,
    });
    expect(notes[0]).toContain("may have shifted");
  });

  it("prefers a trouble that stops the run to an earlier shift of the mean", () => {
    const { onset } = find(
      noisy(62_626_262, (t) => (t < 750 ? 0 : 0.08) + (t < 1100 ? 0 : 0.05 * wave(t * 1.7))),
    );
    expect(onset!.kind).toBe("wake-breakdown");
    expect(Math.abs(onset!.index! - 1100)).toBeLessThan(10);
  });

  it("names no place for trouble in the first tenth, and trusts nothing", () => {
    const x = noisy(63_636_363, () => 0);
    x.fill(Number.NaN, 40);
    expect(find(x).onset).toMatchObject({
      kind: "no-stable-baseline",
      index: null,
      time: null,
      band: null,
      alarmIndex: 40,
      trustedEndIndex: 0,
    });
    const early = find(noisy(64_646_464, (t) => Math.min(1e6, 0.01 * Math.exp(0.02 * t)) * wave(t))).onset;
    expect(early?.kind ?? "no-stable-baseline").toBe("no-stable-baseline");
    expect(find(noisy(65_656_565, (t) => Math.exp(0.5 * t))).onset).toMatchObject({
      kind: "no-stable-baseline",
    });
  });
});

describe("the guard before an onset", () => {
  const layout = { periods: [], ignoredPeriods: [], block: 20, skip: 100, arming: { late: 4, blocks: 10 } };

  it("is two blocks or three e-folds before the band, whichever is more", () => {
    const at = (growthPerStep: number | null) =>
      trustedEnd({ kind: "blow-up", index: 1000, band: [980, 1010], growthPerStep }, layout);
    expect(at(0.02)).toBe(830);
    expect(at(0.5)).toBe(940);
    expect(at(null)).toBe(940);
  });

  it("keeps 60 % of the sound stretch", () => {
    const found = { kind: "blow-up", index: 1000, band: [200, 1100], growthPerStep: 0.01 } as const;
    expect(trustedEnd(found, layout)).toBe(640);
  });
});

describe("refusals", () => {
  it("names the channel whose length is wrong", () => {
    const history = { times: new Float64Array(10), channels: { CN: new Float64Array(9) } };
    expect(() => locateOnset(history, options)).toThrow(/CN has 9 samples, time has 10/);
  });

  it("refuses an alarm beyond the history", () => {
    const alarm = {
      channel: "CN",
      alarmIndex: 20,
      kind: "blow-up",
      source: "guard",
      suspectIndex: 15,
      stops: true,
      armed: true,
    } as const;
    const history = { times: new Float64Array(10), channels: { CN: new Float64Array(10) } };
    expect(() => locateAfterAlarm(history, alarm, options)).toThrow(/does not reach the alarm of CN/);
  });

  it("says nothing about a history of a few samples", () => {
    const history = { times: new Float64Array(3), channels: { CN: Float64Array.of(1, 2, 3) } };
    expect(locateOnset(history, { periodsSteps: [], plannedSteps: 3 }).onset).toBeNull();
  });
});
