import { mean, variance } from "./mean.ts";
import { studentTCdf } from "./student-t.ts";

/**
 * Welch's test of equal means of two samples whose variances may differ.
 *
 *   t = (ȳ − x̄) / sqrt(s_x²/n_x + s_y²/n_y), degrees of freedom after Welch and Satterthwaite
 *
 * Limits: for independent samples; correlated ones make p too small. Two samples without variance give t 0 (equal) or
 * infinite (unequal).
 *
 * @param x shape [n], n >= 2, finite
 * @param y shape [m], m >= 2, finite
 * @returns t, degrees of freedom, two-sided p in [0, 1]
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Welch (1947), The generalization of Student's problem (from memory); as t.test of R
 */
export function welchTest(x: Float64Array, y: Float64Array): { t: number; df: number; p: number } {
  const difference = mean(y) - mean(x);
  const a = variance(x) / x.length;
  const b = variance(y) / y.length;
  if (a + b === 0) {
    const t = difference === 0 ? 0 : Math.sign(difference) * Number.POSITIVE_INFINITY;
    return { t, df: x.length + y.length - 2, p: difference === 0 ? 1 : 0 };
  }
  const t = difference / Math.sqrt(a + b);
  const df = (a + b) ** 2 / (a ** 2 / (x.length - 1) + b ** 2 / (y.length - 1));
  return { t, df, p: 2 * studentTCdf(-Math.abs(t), df) };
}
