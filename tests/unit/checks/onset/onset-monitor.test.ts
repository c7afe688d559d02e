import { serialize } from "node:v8";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { ChannelMonitor } from "../../../../checks/onset/channel-monitor.ts";
import { createOnsetMonitor, type OnsetMonitorOptions } from "../../../../checks/onset/index.ts";
import { monitorLayout } from "../../../../checks/onset/monitor-layout.ts";
import { seededNormal, seededUniform } from "../../../helpers/seeded.ts";

const N = 1500;
const options: OnsetMonitorOptions = { channels: ["CN"], periodsSteps: [10], plannedSteps: N };

/** Level 1, a period of 10, noise of 1 %, and from `at` on fluctuations that grow or jump. */
function troubled(seed: number, at = 900, rate = 0.02): Float64Array {
  const normal = seededNormal(seededUniform(seed));
  return Float64Array.from({ length: N }, (_, t) => {
    const grown = t < at - 200 ? 0 : 0.014 * Math.exp(Math.min(rate * (t - at), 8)) * Math.sin(t / 3.1);
    return 1 + 0.05 * Math.sin((2 * Math.PI * t) / 10) + 0.01 * normal() + grown;
  });
}

function run(x: Float64Array, more: Partial<OnsetMonitorOptions> = {}) {
  const monitor = createOnsetMonitor({ ...options, ...more });
  for (const v of x) monitor.push([v]);
  return monitor;
}

const brief = (x: Float64Array, more: Partial<OnsetMonitorOptions> = {}) =>
  run(x, more).alarms.map((a) => `${a.source} ${a.alarmIndex}`);

const seeds = fc.integer({ min: 10_000_000, max: 2_000_000_000 });

describe("a run of one channel", () => {
  it("is quiet without trouble and speaks up within 200 steps of a growth", () => {
    expect(brief(troubled(36_936_936, N + 500))).toEqual([]);
    const { alarms } = run(troubled(36_936_936));
    expect(alarms[0]!.stops).toBe(true);
    expect(alarms[0]!.alarmIndex).toBeGreaterThan(900);
    expect(alarms[0]!.alarmIndex).toBeLessThan(1100);
  });

  it("returns the alarm at the step at which it comes, and only then", () => {
    const monitor = createOnsetMonitor(options);
    const returned = Array.from(troubled(36_936_936), (v) => monitor.push([v])).flatMap((a) =>
      a ? [a] : [],
    );
    expect(returned[0]).toEqual(monitor.alarms[0]);
    expect(new Set(returned).size).toBe(returned.length);
  });

  it("gives the same alarms for values scaled by a power of two", () => {
    fc.assert(
      fc.property(seeds, fc.integer({ min: -60, max: 60 }), (seed, power) => {
        const x = troubled(seed);
        expect(brief(x.map((v) => v * 2 ** power))).toEqual(brief(x));
      }),
      { seed: 21, numRuns: 20 },
    );
  });

  it("gives the same scale alarm for values with a constant added, as long as the level stays near", () => {
    // Level enters through dust and what matters, 1e-4 and 1e-3 of it; the noise here is 1e-2.
    fc.assert(
      fc.property(seeds, fc.double({ min: -0.5, max: 1, noNaN: true }), (seed, shift) => {
        const scale = (x: Float64Array) => brief(x).filter((a) => a.startsWith("scale"));
        const x = troubled(seed, 900, 0.03);
        expect(scale(x.map((v) => v + shift))).toEqual(scale(x));
      }),
      { seed: 22, numRuns: 20 },
    );
  });

  it("never speaks up later when it is more sensitive", () => {
    fc.assert(
      fc.property(seeds, fc.double({ min: 0.4, max: 1, noNaN: true }), (seed, sensitivity) => {
        const x = troubled(seed);
        const first = (s: number) => run(x, { sensitivity: s }).alarms[0]?.alarmIndex ?? N;
        expect(first(sensitivity)).toBeLessThanOrEqual(first(1));
        expect(first(1)).toBeLessThanOrEqual(first(1 / sensitivity));
      }),
      { seed: 23, numRuns: 20 },
    );
  });

  it("knows at every step what a monitor of the whole run knows up to there, so a cut run replays alike", () => {
    const x = troubled(36_936_936);
    const whole = run(x).alarms;
    fc.assert(
      fc.property(fc.integer({ min: 1, max: N }), (cut) => {
        expect(run(x.slice(0, cut)).alarms).toEqual(whole.filter((a) => a.alarmIndex < cut));
      }),
      { seed: 24, numRuns: 20 },
    );
  });

  it("stops at once at a value that is not finite, wherever it comes", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: N - 1 }),
        fc.constantFrom(Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY),
        (at, bad) => {
          const monitor = createOnsetMonitor(options);
          const x = troubled(36_936_936, N + 500);
          for (let t = 0; t < at; t++) expect(monitor.push([x[t]!])).toBeNull();
          expect(monitor.push([bad])).toMatchObject({ source: "non-finite", alarmIndex: at, stops: true });
        },
      ),
      { seed: 25, numRuns: 40 },
    );
  });

  it("stops at a bound that the user set", () => {
    const monitor = createOnsetMonitor({ ...options, bounds: { CN: { max: 2, min: -1 } } });
    expect(monitor.push([1.9])).toBeNull();
    expect(monitor.push([2.1])).toMatchObject({ source: "bound", channel: "CN", alarmIndex: 1 });
  });

  it("notes an isolated spike and a shift of the mean, and stops for neither", () => {
    const x = troubled(36_936_936, N + 500);
    x[700] = 3;
    for (let t = 1000; t < N; t++) x[t] = x[t]! + 0.15;
    const monitor = run(x);
    expect(monitor.alarms.filter((a) => a.stops)).toEqual([]);
    expect(monitor.notes).toContain("CN has an isolated spike at sample 700.");
    expect(monitor.notes.some((n) => n.startsWith("The mean of CN may have shifted near sample 9"))).toBe(
      true,
    );
  });

  it("says which declared period it does without", () => {
    const monitor = createOnsetMonitor({ channels: ["CN"], periodsSteps: [350, 12], plannedSteps: 480 });
    expect(monitor.notes[0]).toContain("350 steps");
  });

  it("takes a count that begins to alternate as what it is", () => {
    const uniform = seededUniform(91_919_191);
    const count = Float64Array.from({ length: N }, (_, t) =>
      t < 40 ? 12 : 5 + (t > 800 && uniform() < 0.5 ? 1 : 0),
    );
    expect(brief(count)).toEqual([]);
    const louder = count.map((v, t) => (t > 800 ? v + Math.floor(40 * uniform()) : v));
    expect(brief(louder).length).toBeGreaterThan(0);
  });

  it("is quiet about dust that grows in a noise-free run, in either way, and about spikes of dust", () => {
    const dust = (t: number) => 3e-8 * Math.exp(Math.min(0.02 * (t - 700), 8));
    const cycle = (t: number) => 1 + 0.05 * Math.sin((2 * Math.PI * t) / 10);
    expect(brief(Float64Array.from({ length: N }, (_, t) => cycle(t) + dust(t)))).toEqual([]);
    expect(brief(Float64Array.from({ length: N }, (_, t) => cycle(t) + dust(t) * Math.sin(t / 3)))).toEqual(
      [],
    );
    const spikes = Float64Array.from({ length: N }, (_, t) => cycle(t) + (t > 700 && t % 7 === 0 ? 2e-3 : 0));
    expect(brief(spikes)).toEqual([]);
  });

  it("takes a constant and zeros without an alarm", () => {
    expect(brief(new Float64Array(N).fill(3))).toEqual([]);
    expect(brief(new Float64Array(N))).toEqual([]);
  });

  it("needs no more memory for 400 000 samples than for 100 000", () => {
    const normal = seededNormal(seededUniform(44_332_211));
    const layout = monitorLayout([36, 10], 2e5);
    const monitor = new ChannelMonitor({ channel: "CN", layout, bound: {}, sensitivity: 1 });
    const sizes: number[] = [];
    for (let t = 1; t <= 400_000; t++) {
      monitor.push(1 + 0.01 * normal());
      if (t % 100_000 === 0) sizes.push(serialize(monitor).length);
    }
    expect(Math.max(...sizes)).toBeLessThan(1.1 * sizes[0]!);
    expect(Math.max(...sizes)).toBeLessThan(80_000);
  });
});

describe("several channels", () => {
  it("lists alarms in the order of time, then of the channels", () => {
    const monitor = createOnsetMonitor({ ...options, channels: ["a", "b"] });
    const x = troubled(36_936_936);
    for (const v of x) monitor.push([v, 2 * v]);
    expect(monitor.alarms.slice(0, 2).map((a) => a.channel)).toEqual(["a", "b"]);
    expect(monitor.alarms[0]!.alarmIndex).toBe(monitor.alarms[1]!.alarmIndex);
  });

  it("refuses no channels, a sample of the wrong length and a sensitivity of zero, saying what to do", () => {
    expect(() => createOnsetMonitor({ ...options, channels: [] })).toThrow(/no channels/);
    expect(() => createOnsetMonitor(options).push([1, 2])).toThrow(/2 values came for 1 channels/);
    expect(() => createOnsetMonitor({ ...options, sensitivity: 0 })).toThrow(/sensitivity is 0/);
    expect(() => createOnsetMonitor({ ...options, sensitivity: Number.NaN })).toThrow(/sensitivity is NaN/);
  });
});
