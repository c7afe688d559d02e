import { AppError } from "../../orchestrator/contract/index.ts";
import { requireFinite } from "./finite-series.ts";
import { mean } from "./mean.ts";
import { studentTCdf } from "./student-t.ts";

/** A straight line y = intercept + slope · u, with the standard errors of ordinary least squares. */
interface Line {
  readonly intercept: number;
  readonly slope: number;
  readonly interceptSe: number;
  readonly slopeSe: number;
  /** Variance about the line, n − 2 degrees of freedom, unit of y squared. */
  readonly residualVariance: number;
  /** slope / slopeSe; infinite for a perfect line, 0 for a flat one. */
  readonly t: number;
  /** Two-sided p-value of t on n − 2 degrees of freedom. */
  readonly p: number;
}

/**
 * Ordinary least squares of y on one regressor.
 *
 *   slope = Σ (u − ū)(y − ȳ) / Σ (u − ū)²;  slopeSe² = s² / Σ (u − ū)²;  interceptSe² = s² (1/n + ū² / Σ (u − ū)²)
 *
 * Limits: the errors hold for independent residuals of one variance; correlated ones make them too small.
 *
 * @param u shape [n], the regressor, not constant
 * @param y shape [n], n >= 3, finite
 * @returns the line in the units of u and y
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Draper & Smith (1998), Applied Regression Analysis, chapter 1 (from memory); as lm of R
 */
export function linearRegression(u: Float64Array, y: Float64Array): Line {
  requireFinite(y, "the regression", 3);
  requireFinite(u, "the regression", 3);
  const n = y.length;
  const uMean = mean(u);
  const yMean = mean(y);
  let uu = 0;
  let uy = 0;
  for (let i = 0; i < n; i++) {
    uu += (u[i]! - uMean) ** 2;
    uy += (u[i]! - uMean) * (y[i]! - yMean);
  }
  if (!(uu > 0) || u.length !== n)
    throw new AppError("HISTORY_INVALID", "the regressor has to vary and to match the series in length");
  const slope = uy / uu;
  let rest = 0;
  for (let i = 0; i < n; i++) rest += (y[i]! - yMean - slope * (u[i]! - uMean)) ** 2;
  const residualVariance = rest / (n - 2);
  const slopeSe = Math.sqrt(residualVariance / uu);
  const t = slope === 0 ? 0 : slope / slopeSe;
  return {
    slope,
    slopeSe,
    residualVariance,
    t,
    intercept: yMean - slope * uMean,
    interceptSe: Math.sqrt(residualVariance * (1 / n + uMean ** 2 / uu)),
    p: 2 * studentTCdf(-Math.abs(t), n - 2),
  };
}
