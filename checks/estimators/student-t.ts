import { incompleteBeta } from "./incomplete-beta.ts";

/**
 * Distribution function of Student's t.
 *
 *   P(T <= t) = 1 − I_{ν/(ν+t²)}(ν/2, 1/2) / 2 for t >= 0
 *
 * Limits: relative accuracy 1e-12 in the lower tail for ν up to some thousands.
 *
 * @param t finite or infinite
 * @param df ν > 0, need not be whole
 * @returns in [0, 1]; NaN for NaN or ν <= 0
 * @see Abramowitz & Stegun (1964), 26.7.1
 */
export function studentTCdf(t: number, df: number): number {
  if (Number.isNaN(t) || !(df > 0)) return Number.NaN;
  if (!Number.isFinite(t)) return t > 0 ? 1 : 0;
  const square = t * t;
  // Whichever argument is the smaller one keeps its digits.
  const tail =
    square < 1
      ? 0.5 * (1 - incompleteBeta(square / (df + square), 0.5, df / 2))
      : 0.5 * incompleteBeta(df / (df + square), df / 2, 0.5);
  return t > 0 ? 1 - tail : tail;
}

/**
 * Quantile of Student's t, by bisection of the distribution function.
 *
 * Limits: relative accuracy 1e-11 for p in [1e-10, 1 − 1e-10] and ν >= 1.
 *
 * @param p in (0, 1)
 * @param df ν > 0, need not be whole
 * @returns t with P(T <= t) = p; ∓infinity at p = 0 and 1; NaN out of range
 * @see Abramowitz & Stegun (1964), 26.7.1
 */
export function studentTQuantile(p: number, df: number): number {
  if (!(p >= 0 && p <= 1 && df > 0)) return Number.NaN;
  if (p > 0.5) return -studentTQuantile(1 - p, df);
  if (p === 0) return Number.NEGATIVE_INFINITY;
  if (p === 0.5) return 0;
  let low = -1;
  while (studentTCdf(low, df) > p) low *= 2;
  let high = 0;
  for (let i = 0; i < 200 && high - low > 1e-15 * -low; i++) {
    const middle = (low + high) / 2;
    if (studentTCdf(middle, df) > p) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}
