// Elementary estimators of a time series: moments, correlation, long-run variance, distributions, periods, resampling.
// Pure functions of one series each, one estimator a file; they judge nothing, the folder above does. Start with mean.ts.
export { autocorrelation, autocovariance } from "./autocovariance.ts";
export { type Autoregression, autoregression } from "./autoregression.ts";
export { batchMeans } from "./batch-means.ts";
export { cycleMeans } from "./cycle-means.ts";
export { effectiveSampleSize } from "./effective-sample-size.ts";
export { findPeriod } from "./find-period.ts";
export { firstNonFinite } from "./finite-series.ts";
export { incompleteBeta } from "./incomplete-beta.ts";
export { KPSS_LEVEL_1_PERCENT, KPSS_LEVEL_5_PERCENT, kpss } from "./kpss.ts";
export { leastSquares } from "./least-squares.ts";
export { linearRegression } from "./linear-regression.ts";
export { longRunVarianceAutoregressive } from "./long-run-variance-autoregressive.ts";
export { andrewsBandwidth, longRunVarianceBartlett } from "./long-run-variance-bartlett.ts";
export { mean, variance } from "./mean.ts";
export { movingAverage } from "./moving-average.ts";
export { mser } from "./mser.ts";
export { resample } from "./resample.ts";
export { studentTCdf, studentTQuantile } from "./student-t.ts";
export { vonNeumannRatio } from "./von-neumann-ratio.ts";
export { welchTest } from "./welch-test.ts";
