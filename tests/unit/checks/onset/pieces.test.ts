import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { blockLogRms } from "../../../../checks/onset/block-log-rms.ts";
import { bestChange, meanCost } from "../../../../checks/onset/change-point.ts";
import { ExpandingReference } from "../../../../checks/onset/expanding-reference.ts";
import { fitGrowth, onsetBand } from "../../../../checks/onset/growth-fit.ts";
import { Guard } from "../../../../checks/onset/guard.ts";
import { lagPolynomial } from "../../../../checks/onset/lag-polynomial.ts";
import { MeanShift } from "../../../../checks/onset/mean-shift.ts";
import { median, medianInPlace } from "../../../../checks/onset/median-in-place.ts";
import { monitorLayout } from "../../../../checks/onset/monitor-layout.ts";
import { MonotoneGrowth } from "../../../../checks/onset/monotone-growth.ts";
import { removePeriods } from "../../../../checks/onset/period-template.ts";
import { robustScale } from "../../../../checks/onset/robust-scale.ts";
import { growingScaleLikelihood } from "../../../../checks/onset/scale-likelihood.ts";
import { SpikeCluster } from "../../../../checks/onset/spike-cluster.ts";
import { spikeFlags } from "../../../../checks/onset/spike-flags.ts";
import { seededNormal, seededUniform } from "../../../helpers/seeded.ts";

const finite = fc.double({ min: -1e6, max: 1e6, noNaN: true });

describe("median and robust scale", () => {
  it("takes the middle of an odd count and the mean of the two middle ones of an even count", () => {
    expect(median(Float64Array.of(3, 1, 2))).toBe(2);
    expect(median(Float64Array.of(4, 1, 3, 2))).toBe(2.5);
    expect(median(Float64Array.of(7))).toBe(7);
    expect(median(new Float64Array(0))).toBeNaN();
  });

  it("is the middle of the sorted values, whatever they are", () => {
    fc.assert(
      fc.property(fc.array(finite, { minLength: 1, maxLength: 60 }), (values) => {
        const sorted = Float64Array.from(values).sort();
        const n = sorted.length;
        const [low, high] = [sorted[(n - 1) >> 1]!, sorted[n >> 1]!];
        expect(medianInPlace(Float64Array.from(values), n)).toBe(n % 2 === 1 ? high : low + (high - low) / 2);
      }),
      { seed: 11 },
    );
  });

  it("gives 1/0.67449 for 1, 1, 2, 2, 4, 6, 9: deviations from the median 2 are 1, 1, 0, 0, 2, 4, 7, their median 1", () => {
    const values = Float64Array.of(1, 1, 2, 2, 4, 6, 9);
    expect(robustScale(values, 7, new Float64Array(7))).toBeCloseTo(1 / 0.674489750196082, 12);
  });

  it("reads 1.48 times the standard deviation of a sine and 0.65 times that of Student's t with 3 degrees", () => {
    const n = 9000;
    const scale = (values: Float64Array) => robustScale(values, n, new Float64Array(n));
    const sine = Float64Array.from({ length: n }, (_, t) => Math.sin(t));
    expect(scale(sine) / Math.SQRT1_2).toBeCloseTo(1.483, 2);
    const normal = seededNormal(seededUniform(77_001_122));
    const student = () => normal() / Math.sqrt((normal() ** 2 + normal() ** 2 + normal() ** 2) / 3);
    // Its standard deviation is sqrt 3; the sampling error of the scale is about 1 %.
    expect(Math.abs(scale(Float64Array.from({ length: n }, student)) / Math.sqrt(3) - 0.655)).toBeLessThan(
      0.03,
    );
  });

  it("is zero for a constant and keeps its argument", () => {
    const values = Float64Array.of(5, 5, 5);
    expect(robustScale(values, 3, new Float64Array(3))).toBe(0);
    expect([...values]).toEqual([5, 5, 5]);
  });
});

describe("expanding reference", () => {
  it("agrees with sorting while it holds everything", () => {
    fc.assert(
      fc.property(fc.array(finite, { minLength: 1, maxLength: 100 }), (values) => {
        const reference = new ExpandingReference(128);
        for (const v of values) reference.add(v);
        const centre =
          (values.toSorted((a, b) => a - b)[(values.length - 1) >> 1]! +
            values.toSorted((a, b) => a - b)[values.length >> 1]!) /
          2;
        expect(reference.median()).toBe(centre);
        const deviations = Float64Array.from(values, (v) => Math.abs(v - centre));
        expect(reference.spread()).toBeCloseTo(1.4826 * median(deviations), 6);
      }),
      { seed: 12 },
    );
  });

  it("keeps median and spread of a long stream within sampling error, in bounded memory", () => {
    const normal = seededNormal(seededUniform(918_273_645));
    const reference = new ExpandingReference(256);
    for (let i = 0; i < 100_000; i++) reference.add(normal());
    expect(reference.count).toBe(100_000);
    // 128 to 256 values are kept: standard error of the median 1.25/sqrt(128) = 0.11.
    expect(Math.abs(reference.median())).toBeLessThan(0.35);
    expect(Math.abs(reference.spread() - 1)).toBeLessThan(0.35);
  });

  it("keeps values of the whole past: the median of a ramp is its middle", () => {
    const reference = new ExpandingReference(64);
    for (let i = 0; i < 10_000; i++) reference.add(i);
    expect(Math.abs(reference.median() - 5000)).toBeLessThan(200);
  });

  it("says NaN while empty", () => {
    expect(new ExpandingReference().median()).toBeNaN();
    expect(new ExpandingReference().spread()).toBeNaN();
  });
});

describe("layout of the blocks", () => {
  it("takes 20 samples without a period and whole multiples of the longest one with it", () => {
    expect(monitorLayout([], 5000)).toMatchObject({ block: 20, skip: 500 });
    expect(monitorLayout([36, 10], 5000)).toMatchObject({ block: 36, periods: [36, 10] });
    expect(monitorLayout([8], 5000)).toMatchObject({ block: 24 });
    expect(monitorLayout([18.3], 5000)).toMatchObject({ block: 37 });
  });

  it("takes shorter blocks in a short run", () => {
    expect(monitorLayout([12], 480)).toMatchObject({ block: 12, skip: 48 });
  });

  it("drops divisors of another period, periods below 2 and what is not finite", () => {
    expect(monitorLayout([36, 12, 18, 1.5, Number.NaN], 5000).periods).toEqual([36]);
    expect(monitorLayout([37.5, 12.5], 5000).periods).toEqual([37.5]);
  });

  it("ignores a loop that the run flies once or twice, and takes its divisors instead", () => {
    const layout = monitorLayout([350, 12], 480);
    expect(layout.ignoredPeriods).toEqual([350]);
    expect(layout.periods).toEqual([12]);
    expect(monitorLayout([360, 12], 480).periods).toEqual([12]);
  });
});

describe("seasonal differences", () => {
  const apply = (x: Float64Array, periods: readonly number[], t: number) => {
    const { lags, weights } = lagPolynomial(periods, 1);
    return lags.reduce((sum, lag, i) => sum + weights[i]! * x[t - lag]!, 0);
  };

  it("is (x_t − x_{t−10})/sqrt 2 for one period of 10", () => {
    const { lags, weights, reach } = lagPolynomial([10], 1);
    expect([...lags]).toEqual([0, 10]);
    expect(weights[0]).toBeCloseTo(Math.SQRT1_2, 15);
    expect(weights[1]).toBeCloseTo(-Math.SQRT1_2, 15);
    expect(reach).toBe(10);
  });

  it("leaves nothing of a signal with two periods, and keeps the variance of white noise", () => {
    const x = Float64Array.from({ length: 200 }, (_, t) => (t % 36) ** 2 + Math.sin((2 * Math.PI * t) / 10));
    for (let t = 60; t < 200; t++) expect(Math.abs(apply(x, [36, 10], t))).toBeLessThan(1e-10);
    const { weights } = lagPolynomial([36, 10], 2);
    expect(weights.reduce((sum, w) => sum + w * w, 0)).toBeCloseTo(1, 12);
  });

  it("leaves at most (π/m)²/2 of a sine whose period of m samples is not whole", () => {
    const m = 18.3;
    const x = Float64Array.from({ length: 400 }, (_, t) => Math.sin((2 * Math.PI * t) / m));
    const { weights } = lagPolynomial([m], 1);
    for (let t = 40; t < 400; t++) {
      expect(Math.abs(apply(x, [m], t)) / weights[0]!).toBeLessThan((Math.PI / m) ** 2 / 2);
    }
  });
});

describe("spikes", () => {
  it("flags a sample that stands out from both sides, not a step and not a ramp", () => {
    const found = new Int32Array(40);
    const flat = new Float64Array(40);
    const spike = flat.map((_, i) => (i === 20 ? 10 : 0));
    const step = flat.map((_, i) => (i >= 20 ? 10 : 0));
    const ramp = flat.map((_, i) => 5 * i);
    expect(spikeFlags(spike, spike, 40, 8, found)).toBe(1);
    expect(found[0]).toBe(20);
    expect(spikeFlags(step, step, 40, 8, found)).toBe(0);
    expect(spikeFlags(ramp, ramp, 40, 8, found)).toBe(0);
  });

  it("does not flag the echo of a spike, which the doubled lags do not have", () => {
    const r = Float64Array.from({ length: 60 }, (_, i) => (i === 20 ? 10 : i === 30 ? -10 : 0));
    const r2 = Float64Array.from({ length: 60 }, (_, i) => (i === 20 ? 10 : i === 40 ? -10 : 0));
    const found = new Int32Array(60);
    expect(spikeFlags(r, r2, 60, 8, found)).toBe(1);
    expect(found[0]).toBe(20);
  });

  const arming = { late: 4, blocks: 10 };

  it("calls a cluster of 3 spikes a block in its third block: 3·(3 − 0.317) = 8.05 > 8", () => {
    // λ0 = 0.05, λ1 = 1, so k = 0.95/ln 20 = 0.317.
    const cluster = new SpikeCluster({ arming, sensitivity: 1 });
    for (let j = 0; j < 20; j++) expect(cluster.feed([])).toBe(false);
    expect(cluster.feed([400, 406, 412])).toBe(false);
    expect(cluster.feed([420, 426, 432])).toBe(false);
    expect(cluster.feed([440, 446, 452])).toBe(true);
    expect(cluster.clusterStart).toBe(400);
  });

  it("counts flags within three steps as one spike, and notes a single one without a call", () => {
    const cluster = new SpikeCluster({ arming, sensitivity: 1 });
    for (let j = 0; j < 20; j++) cluster.feed([]);
    expect(cluster.feed([400, 401, 403])).toBe(false);
    expect(cluster.spikes).toBe(1);
    expect(cluster.firstSpike).toBe(400);
  });

  it("takes pulses that were always there as usual", () => {
    const cluster = new SpikeCluster({ arming, sensitivity: 1 });
    for (let j = 0; j < 200; j++) expect(cluster.feed([20 * j + 3, 20 * j + 13])).toBe(false);
  });
});

describe("guards", () => {
  it("speaks up at the fifth sample in a row beyond 20 widths", () => {
    const guard = new Guard(1);
    for (let t = 0; t < 100; t++) guard.feed(1);
    guard.arm(1, 0.1);
    expect([3.5, 3.5, 3.5, 3.5, 1, 3.5, 3.5, 3.5, 3.5].some((x) => guard.feed(x))).toBe(false);
    expect(guard.feed(3.5)).toBe(true);
  });

  it("before it is armed speaks up for a blow-up, not for a power of time", () => {
    const grows = (f: (t: number) => number) => {
      const guard = new Guard(1);
      for (let t = 0; t < 3000; t++) if (guard.feed(f(t))) return true;
      return false;
    };
    expect(grows((t) => Math.exp(t / 15))).toBe(true);
    expect(grows((t) => t ** 3)).toBe(false);
    expect(grows((t) => (t < 20 ? 1 : -0.999))).toBe(false);
  });

  it("does not speak up for zeros at the start", () => {
    const guard = new Guard(1);
    for (let t = 0; t < 200; t++) expect(guard.feed(t < 20 ? 0 : 1)).toBe(false);
  });
});

describe("monotone growth and shifts of the mean, block by block", () => {
  const normal = seededNormal(seededUniform(55_667_788));

  it("finds an exponential and no ramp, square or sine", () => {
    const calls = (f: (j: number) => number) => {
      const growth = new MonotoneGrowth(1);
      for (let j = 0; j < 200; j++) if (growth.feed(1 + f(j) + 0.001 * normal(), 0)) return j;
      return null;
    };
    expect(calls((j) => 1e-3 * Math.exp(0.6 * (j - 50)))).toBeGreaterThan(52);
    expect(calls((j) => 1e-3 * Math.exp(0.6 * (j - 50)))).toBeLessThan(64);
    expect(calls((j) => -1e-3 * Math.exp(0.1 * (j - 100)))).not.toBeNull();
    expect(calls((j) => 0.05 * j)).toBeNull();
    expect(calls((j) => (0.05 * j) ** 2)).toBeNull();
    expect(calls((j) => 3 * Math.sin(j / 15))).toBeNull();
  });

  it("finds a step of 8 block noises, not one of 2, not a ramp", () => {
    const calls = (f: (j: number) => number) => {
      const shift = new MeanShift(1);
      for (let j = 0; j < 120; j++) {
        const found = shift.feed(f(j) + normal(), 0);
        if (found) return { j, step: found.step };
      }
      return null;
    };
    const found = calls((j) => (j < 60 ? 0 : 20));
    expect(found!.j).toBeGreaterThan(60);
    expect(found!.j).toBeLessThan(68);
    expect(Math.abs(found!.step - 20)).toBeLessThan(4);
    expect(calls((j) => (j < 60 ? 0 : 2))).toBeNull();
    expect(calls((j) => 0.7 * j)).toBeNull();
  });

  it("keeps quiet about a step that is smaller than what matters", () => {
    const shift = new MeanShift(1);
    for (let j = 0; j < 120; j++) expect(shift.feed((j < 60 ? 0 : 20) + normal(), 30)).toBeNull();
  });
});

describe("periods taken out by their shape", () => {
  it("leaves what is not periodic, exactly where the periods are whole", () => {
    const x = Float64Array.from({ length: 600 }, (_, t) => 2 + (t % 12) - 5.5 + (t === 550 ? 7 : 0));
    const e = removePeriods(x, [12], { from: 100, to: 400 }, 600);
    expect(e[99]).toBeNaN();
    for (let t = 100; t < 600; t++) expect(e[t]).toBeCloseTo(t === 550 ? 9 : 2, 9);
  });

  it("leaves less than 3 % of a sine with a period that is not whole", () => {
    const x = Float64Array.from({ length: 800 }, (_, t) => Math.sin((2 * Math.PI * t) / 18.3));
    const e = removePeriods(x, [18.3], { from: 0, to: 600 }, 800);
    expect(Math.max(...e.map(Math.abs))).toBeLessThan(0.03);
  });

  it("leaves a period in that the baseline does not show three times", () => {
    const x = Float64Array.from({ length: 300 }, (_, t) => t % 100);
    expect([...removePeriods(x, [100], { from: 0, to: 250 }, 300)]).toEqual([...x]);
  });
});

describe("log scale of blocks", () => {
  it("is ln 3 for sizes of 3, and the floor for nothing", () => {
    const e = Float64Array.from({ length: 20 }, (_, t) => (t % 2 === 0 ? 3 : -3));
    expect(blockLogRms(e, { from: 0, to: 20, block: 10, floor: 0 })[0]).toBeCloseTo(Math.log(3), 12);
    const zero = new Float64Array(20);
    expect(blockLogRms(zero, { from: 0, to: 20, block: 10, floor: 0.1 })[1]).toBeCloseTo(Math.log(0.1), 12);
    expect(blockLogRms(zero, { from: 0, to: 20, block: 10, floor: 0 })[0]).toBe(Number.NEGATIVE_INFINITY);
  });

  it("cuts one spike back to six medians", () => {
    const e = Float64Array.of(1, 1, 1, 1, 1, 1, 1, 1, 1, 1e9);
    expect(blockLogRms(e, { from: 0, to: 10, block: 10, floor: 0 })[0]).toBeCloseTo(0.5 * Math.log(4.5), 9);
  });

  it("does not overflow", () => {
    const e = new Float64Array(10).fill(1e200);
    expect(blockLogRms(e, { from: 0, to: 10, block: 10, floor: 0 })[0]).toBeCloseTo(Math.log(1e200), 9);
  });
});

describe("growth fit", () => {
  const curve = (n: number, onset: number, rate: number, saturation = Number.POSITIVE_INFINITY) =>
    Float64Array.from(
      { length: n },
      (_, j) => -3 + 0.5 * Math.log1p(Math.exp(2 * rate * (Math.min(j, saturation) - onset))),
    );

  it("gets the parameters of its own curve back", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 15, max: 40, noNaN: true }),
        fc.double({ min: 0.2, max: 1, noNaN: true }),
        (onset, rate) => {
          const fit = fitGrowth(curve(Math.ceil(onset + 4 / rate), onset, rate));
          expect(Math.abs(fit.onset - onset) * rate).toBeLessThan(0.1);
          expect(Math.abs(fit.rate / rate - 1)).toBeLessThan(0.1);
          expect(Math.abs(fit.base + 3)).toBeLessThan(0.05);
        },
      ),
      { seed: 13, numRuns: 30 },
    );
  });

  it("finds where a growth stops", () => {
    const fit = fitGrowth(curve(80, 30, 0.4, 36));
    expect(fit.saturation).toBeGreaterThan(35);
    expect(fit.saturation).toBeLessThan(37);
  });

  it("has a band that holds the onset, and is the wider the noisier the blocks are", () => {
    const normal = seededNormal(seededUniform(123_123_123));
    const noise = Float64Array.from({ length: 60 }, normal);
    const widths = [0.05, 0.3].map((sd) => {
      const y = curve(60, 50, 0.3).map((v, j) => v + sd * noise[j]!);
      const band = onsetBand(y, fitGrowth(y));
      expect(band[0]).toBeLessThanOrEqual(50.5);
      expect(band[1]).toBeGreaterThanOrEqual(49.5);
      return band[1] - band[0];
    });
    expect(widths[1]!).toBeGreaterThan(widths[0]!);
  });

  it("is more likely with the true rate than with another", () => {
    const normal = seededNormal(seededUniform(321_321_321));
    const e = Float64Array.from(
      { length: 1000 },
      (_, t) => normal() * Math.sqrt(1 + Math.exp(0.04 * (t - 700))),
    );
    const at = (rate: number) =>
      growingScaleLikelihood(
        e,
        { from: 0, to: 1000, floor: 0 },
        { onset: 700, rate, saturation: Number.POSITIVE_INFINITY },
      );
    expect(at(0.02)).toBeGreaterThan(at(0.01));
    expect(at(0.02)).toBeGreaterThan(at(0.04));
  });
});

describe("change of the mean", () => {
  it("finds the step of 0, 0, 0, 5, 5, 5 after three values, and gains its sum of squares: 37.5", () => {
    const values = Float64Array.of(0, 0, 0, 5, 5, 5);
    const change = bestChange(meanCost(values, 1), { from: 0, to: 6, shortest: 1 });
    expect(change.index).toBe(3);
    expect(change.gain).toBeCloseTo(37.5, 12);
    expect(change.band).toEqual([3, 3]);
  });
});
