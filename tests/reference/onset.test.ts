import { readFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { bestChange, meanCost, meanSquareCost, meanVarianceCost } from "../../checks/onset/change-point.ts";
import { createOnsetMonitor, locateAfterAlarm, locateOnset } from "../../checks/onset/index.ts";
import type { Onset } from "../../orchestrator/contract/index.ts";

const folder = join(import.meta.dirname, "data");

interface Truth {
  readonly columns: readonly string[];
  readonly periods: readonly number[];
  readonly plannedSteps: number;
  readonly positive: boolean;
  readonly onset: number;
  readonly sigmaPerStep: number | null;
  readonly acceptedClasses: readonly string[];
  readonly toleranceSteps: number;
  readonly maxDelaySteps: number;
}

/** Made by a separate program with known onsets (the sources of disturbance are in the file); never tuned to. */
const truth: Record<string, Truth> = JSON.parse(readFileSync(join(folder, "onset/truth.json"), "utf8"));

function history(file: string, columns: readonly string[]) {
  const rows = readFileSync(join(folder, "onset", file), "utf8")
    .trim()
    .split("\n")
    .slice(1);
  const cells = rows.map((row) => row.split(","));
  const column = (i: number) => Float64Array.from(cells, (c) => (c[i] === "" ? Number.NaN : Number(c[i])));
  return {
    times: column(0),
    channels: Object.fromEntries(columns.map((name, i) => [name, column(i + 1)])),
  };
}

function expectLocated(onset: Onset, t: Truth): void {
  expect(t.acceptedClasses).toContain(onset.kind);
  expect(Math.abs(onset.index! - t.onset)).toBeLessThanOrEqual(t.toleranceSteps);
  expect(onset.alarmIndex - t.onset).toBeLessThanOrEqual(t.maxDelaySteps);
  expect(onset.alarmIndex).toBeGreaterThanOrEqual(t.onset);
  expect(onset.words).toContain(String(onset.index));
  if (onset.kind === "mean-shift") expect(onset.trustedEndIndex).toBeNull();
  else expect(onset.trustedEndIndex!).toBeLessThan(t.onset);
}

describe("sample histories with known onsets", () => {
  const troubled = Object.entries(truth).filter(([, t]) => t.positive);
  const sound = Object.entries(truth).filter(([, t]) => !t.positive);

  it("has both kinds", () => {
    expect([troubled.length, sound.length]).toEqual([8, 5]);
  });

  it.each(sound)("names no onset in the sound history %s", (file, t) => {
    const options = { periodsSteps: t.periods, plannedSteps: t.plannedSteps };
    expect(locateOnset(history(file, t.columns), options).onset).toBeNull();
  });

  it.each(troubled)("locates the onset of the whole history %s", (file, t) => {
    const options = { periodsSteps: t.periods, plannedSteps: t.plannedSteps };
    const { onset } = locateOnset(history(file, t.columns), options);
    expect(onset).not.toBeNull();
    expectLocated(onset!, t);
    if (t.sigmaPerStep !== null) {
      // Measured errors of the rate are 0.1 to 2 %.
      expect(Math.abs(onset!.growthPerStep! / t.sigmaPerStep - 1)).toBeLessThan(0.1);
    }
  });

  it.each(troubled)("locates the onset of %s live, from what is known at the alarm", (file, t) => {
    const whole = history(file, t.columns);
    const options = { periodsSteps: t.periods, plannedSteps: t.plannedSteps };
    const monitor = createOnsetMonitor({ channels: t.columns, ...options });
    const series = t.columns.map((name) => whole.channels[name]!);
    let end = 0;
    while (end < whole.times.length) {
      const alarm = monitor.push(series.map((x) => x[end]!));
      end++;
      if (alarm !== null || monitor.alarms.length > 0) break;
    }
    const channels = Object.fromEntries(t.columns.map((name, i) => [name, series[i]!.slice(0, end)]));
    const onset = locateAfterAlarm({ times: whole.times.slice(0, end), channels }, monitor.alarms[0]!, {
      ...options,
      alarms: monitor.alarms,
    });
    expectLocated(onset, t);
  });
});

describe("classical change points (R 4.2.2, strucchange 1.5-3; values in change-points.json)", () => {
  const classical = JSON.parse(readFileSync(join(folder, "change-points.json"), "utf8"));
  const nile = Float64Array.from(classical.nile.values);
  const djia = Float64Array.from(classical.djia.values);

  it("finds the step of the Nile's yearly flow after 28 years, with the published sums of squares", () => {
    const cost = meanCost(nile, 1);
    const change = bestChange(cost, { from: 0, to: nile.length, shortest: 15 });
    expect(change.index).toBe(classical.nile.strucchange.breakpoints_BIC.k);
    expect(cost(0, nile.length)).toBeCloseTo(classical.nile.strucchange.rss.m0, 2);
    expect(cost(0, 28) + cost(28, nile.length)).toBeCloseTo(classical.nile.strucchange.rss.m1, 3);
  });

  it("gives strucchange's supF for the Nile, and a band within its confidence interval, 25 to 32", () => {
    const variance = classical.nile.strucchange.rss.m1 / (nile.length - 2);
    const { band, gain } = bestChange(meanCost(nile, variance), { from: 0, to: nile.length, shortest: 15 });
    // The gain with the variance of the two-mean fit is the F statistic of one break.
    expect(gain).toBeCloseTo(classical.nile.strucchange.supF_from0_15, 5);
    // Sets from the likelihood are narrower than intervals from the break's asymptotic distribution: here 26 to 29.
    expect(band[0]).toBeGreaterThanOrEqual(classical.nile.strucchange.confint95.lo);
    expect(band[1]).toBeLessThanOrEqual(classical.nile.strucchange.confint95.hi);
    expect(band[1] - band[0]).toBeGreaterThanOrEqual(2);
  });

  it("finds the change of mean and variance of the Nile and of the Dow Jones returns, with R's likelihood ratios", () => {
    const { k, lr } = classical.nile.R_exact_amoc_meanvar;
    const ofNile = bestChange(meanVarianceCost(nile), { from: 0, to: nile.length, shortest: 2 });
    expect(ofNile.index).toBe(k);
    expect(ofNile.gain).toBeCloseTo(lr, 6);
    const ofReturns = bestChange(meanVarianceCost(djia), { from: 0, to: djia.length, shortest: 2 });
    expect(ofReturns.index).toBe(classical.djia.R.amoc_meanvar.k);
    expect(ofReturns.gain).toBeCloseTo(classical.djia.R.amoc_meanvar.lr, 6);
  });

  it("finds the change of variance of the Dow Jones returns about their mean, with R's likelihood ratio", () => {
    const mean = djia.reduce((a, b) => a + b, 0) / djia.length;
    const change = bestChange(meanSquareCost(djia, mean, 0), { from: 0, to: djia.length, shortest: 2 });
    expect(change.index).toBe(classical.djia.R.amoc_var_demeaned.k);
    expect(change.gain).toBeCloseTo(classical.djia.R.amoc_var_demeaned.lr, 6);
  });
});
