import { describe, expect, it } from "vitest";
import { judgeBesideOnset, judgeHistory } from "../../../checks/index.ts";
import type { Onset } from "../../../orchestrator/contract/index.ts";
import { autoregressive } from "../../bench/stationarity/families/noise.ts";
import { randomStream } from "../../bench/stationarity/random.ts";

const noise = (n: number, seed: number) =>
  autoregressive(0.5)
    .make(randomStream(seed), n)
    .map((v) => 10 + v);
const even = (n: number) => Float64Array.from({ length: n }, (_, i) => i * 0.5);
const tolerance = { absolute: 0.5 };

it("judges every channel of a sound history", () => {
  const a = noise(3000, 41_000_003);
  const b = noise(3000, 42_000_007);
  const judged = judgeHistory(
    { times: even(3000), channels: { a, b } },
    { tolerance, tolerances: { b: { absolute: 0.001 } } },
  );
  expect(judged).toMatchObject({ samples: 3000, dt: 0.5, onset: null, notes: [] });
  expect(judged.channels.a!.verdict).toBe("accepted");
  expect(judged.channels.b!.verdict).toBe("needs-longer");
});

it("keeps what precedes a blow-up, with a warning, and leaves the rest out", () => {
  const x = noise(5000, 43_000_009).map((v, i) => v + (i > 4000 ? Math.exp((i - 4000) / 40) - 1 : 0));
  const judged = judgeHistory({ times: even(5000), channels: { x } }, { tolerance });
  expect(judged.onset).not.toBeNull();
  expect(judged.channels.x).toMatchObject({
    verdict: "accepted",
    warnings: expect.arrayContaining(["before-onset"]),
  });
  expect(judged.channels.x!.window!.toIndex).toBeLessThanOrEqual(judged.onset!.index!);
  expect(Math.abs(judged.channels.x!.mean! - 10)).toBeLessThan(0.5);
});

it("says that the scatter changed where a bounded breakdown cuts the record", () => {
  const x = noise(5000, 46_000_017).map((v, i) => 10 + (v - 10) * (i > 3000 ? 6 : 1));
  const judged = judgeHistory({ times: even(5000), channels: { x } }, { tolerance });
  expect(judged.onset!.kind).toBe("wake-breakdown");
  expect(judged.channels.x).toMatchObject({
    verdict: "accepted",
    warnings: ["variance-changed", "before-onset"],
  });
});

it("calls the channel unstable where too little precedes", () => {
  const x = noise(5000, 44_000_011).map((v, i) => v + (i > 4000 ? Math.exp((i - 4000) / 40) - 1 : 0));
  const judged = judgeHistory({ times: even(5000), channels: { x } }, { tolerance: { absolute: 0.001 } });
  expect(judged.channels.x!.verdict).toBe("unstable");
  expect(judged.channels.x!.words).toMatch(/^unstable: .*sample \d+/);
  expect(judged.channels.x!.samplesNeeded).toBeNull();
});

describe("one channel beside an onset", () => {
  const x = noise(2000, 45_000_013);
  const onset = (kind: Onset["kind"], index: number | null, trustedEndIndex: number | null): Onset => ({
    kind,
    channel: "y",
    index,
    time: index,
    band: null,
    growthPerStep: null,
    alarmIndex: 1990,
    trustedEndIndex,
    channelsAgreeing: ["y"],
    words: "",
  });
  const options = { dt: 1, tolerance };
  it("a shift of the mean is a warning and stops nothing", () => {
    const judged = judgeBesideOnset(x, onset("mean-shift", 900, null), options);
    expect(judged).toMatchObject({
      verdict: "accepted",
      warnings: ["mean-shift"],
      window: { toIndex: 2000 },
    });
  });
  it("without a stable baseline there is no number", () => {
    const judged = judgeBesideOnset(x, onset("no-stable-baseline", null, null), options);
    expect(judged).toMatchObject({ verdict: "unstable", mean: null, window: null, samplesNeeded: null });
  });
  it("an onset in another channel cuts this one too", () => {
    const judged = judgeBesideOnset(x, onset("wake-breakdown", 1900, 1800), options);
    expect(judged).toMatchObject({ verdict: "accepted", window: { toIndex: 1800 } });
    expect(judged.words).toMatch(/wake breakdown of y begins at sample 1900/);
  });
});

describe("uneven steps", () => {
  const n = 3000;
  const random = randomStream(46_000_017);
  const times = Float64Array.from({ length: n }, (_, i) => i + 0.4 * random.uniform());
  it("are resampled, said, and indices come back to the samples as given", () => {
    const judged = judgeHistory({ times, channels: { x: noise(n, 47_000_019) } }, { tolerance });
    expect(judged.notes.join()).toMatch(/uneven/);
    expect(judged.channels.x!.window!.toIndex).toBeLessThanOrEqual(n);
    expect(judged.channels.x!.window!.toIndex).toBeGreaterThan(n - 5);
  });
});

describe("refusals", () => {
  const x = noise(300, 48_000_023);
  it("falling and repeated times, with the place", () => {
    for (const at of [100, 101]) {
      const times = even(300);
      times[101] = times[at - 1]!;
      expect(() => judgeHistory({ times, channels: { x } })).toThrow(
        expect.objectContaining({ code: "HISTORY_INVALID", where: "sample 101" }),
      );
    }
  });
  it("times that are no numbers", () => {
    expect(() => judgeHistory({ times: even(300).fill(Number.NaN, 5, 6), channels: { x } })).toThrow(
      /time is NaN/,
    );
  });
  it("channels of another length", () => {
    expect(() => judgeHistory({ times: even(299), channels: { x } })).toThrow(/300 values for 299 times/);
  });
  it("no samples", () => {
    expect(() => judgeHistory({ times: even(0), channels: { x: even(0) } })).toThrow(/no samples/);
  });
  it("one sample needs longer", () => {
    const judged = judgeHistory({ times: even(1), channels: { x: Float64Array.of(3) } });
    expect(judged.channels.x!.verdict).toBe("needs-longer");
  });
  it("a record that becomes no number is not averaged over it", () => {
    const y = noise(2000, 49_000_029);
    y.fill(Number.NaN, 1500);
    const judged = judgeHistory({ times: even(2000), channels: { y } }, { tolerance });
    expect(judged.onset).toMatchObject({ kind: "non-finite" });
    expect(judged.channels.y!.window?.toIndex ?? 0).toBeLessThanOrEqual(1500);
  });
});
