import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import {
  autocorrelation,
  autoregression,
  batchMeans,
  effectiveSampleSize,
  kpss,
  linearRegression,
  longRunVarianceAutoregressive,
  longRunVarianceBartlett,
  mean,
  studentTCdf,
  studentTQuantile,
  variance,
  welchTest,
} from "../../../checks/index.ts";
import { readCsvColumns } from "../../helpers/read-csv-columns.ts";

interface Entry {
  R: Record<string, number>;
  statsmodels: Record<string, number | number[] | Record<string, number>>;
}
const data = new URL("../data/", import.meta.url);
const reference: {
  series: Record<string, Entry>;
  nist_strd_univariate: Record<string, { data?: number[]; mean: number; sd: number; r1: number }>;
  t_quantiles_R_qt: [number, number, number][];
} = JSON.parse(readFileSync(new URL("estimators.json", data), "utf8"));

/** Relative agreement; R prints 15 digits, so 1e-10 leaves room for order of summation only. */
function close(found: number, expected: number, relative = 1e-10, absolute = 0) {
  expect(Math.abs(found - expected)).toBeLessThanOrEqual(relative * Math.abs(expected) + absolute);
}

const names = Object.keys(reference.series);

describe.each(names)("series %s", (name) => {
  const { R, statsmodels } = reference.series[name]!;
  const x = readCsvColumns(new URL(`series/${name}.csv`, data)).x!;
  // A series without noise has an autoregression whose equations are singular to rounding: R's own digits are noise there.
  const singular = name.startsWith("noisefree");

  it("has R's mean, standard deviation and autocorrelations (base R 4.2.2)", () => {
    close(mean(x), R.mean!);
    close(Math.sqrt(variance(x)), R.sd!);
    const rho = autocorrelation(x, 5);
    for (let k = 1; k <= 5; k++) close(rho[k]!, R[`acf${k}`]!, 1e-10, 1e-13);
  });

  it("has coda's spectrum at frequency zero and effective size (coda 0.19-4)", () => {
    expect(autoregression(x).order).toBe(R.spectrum0ar_order);
    const tolerance = singular ? 1e-3 : 1e-10;
    close(longRunVarianceAutoregressive(x).longRunVariance, R.spectrum0ar_spec!, tolerance);
    close(effectiveSampleSize(x), R.effectiveSize!, tolerance);
  });

  it("has tseries's level statistic at its short and long lags (tseries 0.10-53)", () => {
    close(kpss(x, R.kpss_lag!), R.kpss_level_stat!);
    close(kpss(x, R.kpss_long_lag!), R.kpss_level_long_stat!);
  });

  it("has statsmodels's level statistic at its four choices of lags (statsmodels 0.13.5)", () => {
    for (const choice of ["auto", "legacy", "0", "10"]) {
      const { stat, lags } = statsmodels[`kpss_c_nlags_${choice}`] as Record<string, number>;
      close(kpss(x, lags!), stat!);
    }
  });

  it("has statsmodels's Bartlett standard errors of the mean (statsmodels 0.13.5)", () => {
    for (const lags of [0, 10, 30])
      close(
        Math.sqrt(longRunVarianceBartlett(x, lags) / x.length),
        statsmodels[`HAC_mean_se_maxlags${lags}`] as number,
      );
  });

  it("has R's spread and trend of 20 batch means (lm of base R 4.2.2)", () => {
    const means = batchMeans(x, 20);
    close(Math.sqrt(variance(means)), R.batch20_sd!, 1e-10);
    const line = linearRegression(
      Float64Array.from(means, (_, j) => j + 1),
      means,
    );
    // Rounding of the data about their level limits the slope of a noise-free series.
    close(line.slope, R.batch20_slope!, 1e-10, 1e-14);
    close(line.t, R.batch20_slope_t!, 1e-9);
    close(line.p, R.batch20_slope_p!, 1e-9);
  });

  it("has statsmodels's slope in time (statsmodels 0.13.5)", () => {
    const line = linearRegression(
      Float64Array.from(x, (_, i) => i),
      x,
    );
    close(line.slope, (statsmodels.HAC_trend_L30 as Record<string, number>).slope!, 1e-9, 1e-16);
  });
});

describe("certified values of the NIST Statistical Reference Datasets, univariate", () => {
  const alternating = (base: number) =>
    Float64Array.from({ length: 1001 }, (_, i) =>
      i === 0 ? base + 0.2 : i % 2 === 1 ? base + 0.1 : base + 0.3,
    );
  // The steps of NumAcc3 and 4 are not exact in binary, so that only digits above eps·base/0.1 can agree.
  const cases: [string, Float64Array, number][] = [
    ["NumAcc1", Float64Array.from(reference.nist_strd_univariate.NumAcc1!.data!), 1e-13],
    ["NumAcc2", alternating(1), 1e-12],
    ["NumAcc3", alternating(1e6), 1e-8],
    ["NumAcc4", alternating(1e7), 2e-7],
    ["Mavro", Float64Array.from(reference.nist_strd_univariate.Mavro!.data!), 1e-11],
  ];
  it.each(cases)("%s", (name, x, tolerance) => {
    const certified = reference.nist_strd_univariate[name]!;
    close(mean(x), certified.mean, 1e-14);
    close(Math.sqrt(variance(x)), certified.sd, tolerance);
    close(autocorrelation(x, 1)[1]!, certified.r1, Math.max(1e-11, tolerance));
  });
});

it("has R's quantiles of Student's t (qt of base R 4.2.2), and their inverse", () => {
  expect(reference.t_quantiles_R_qt.length).toBeGreaterThan(40);
  for (const [p, df, t] of reference.t_quantiles_R_qt) {
    close(studentTQuantile(p, df), t, 1e-11);
    close(studentTCdf(t, df), p, 1e-12);
  }
});

it("has the t of R's worked example of Welch's test: the sleep data (Student 1908), five digits from memory", () => {
  const one = Float64Array.of(0.7, -1.6, -0.2, -1.2, -0.1, 3.4, 3.7, 0.8, 0, 2);
  const two = Float64Array.of(1.9, 0.8, 1.1, 0.1, -0.1, 4.4, 5.5, 1.6, 4.6, 3.4);
  const { t, df, p } = welchTest(two, one);
  close(t, -1.8608, 5e-5);
  close(df, 17.776, 5e-5);
  close(p, 0.07939, 1e-4);
});
