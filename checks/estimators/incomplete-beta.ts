import { gammaln } from "simple-statistics";

const ITERATIONS_MAX = 10_000;
const TINY = 1e-300;

/**
 * Regularised incomplete beta function, by its continued fraction.
 *
 *   I_x(a, b) = x^a (1−x)^b / (a B(a, b)) · 1/(1+ d_1/(1+ d_2/(1+ …)))
 *
 * Limits: relative accuracy about 1e-13 for a, b up to some thousands; slower (√max(a, b) terms) and less accurate beyond,
 * since the logarithms of the gamma function lose digits.
 *
 * @param x in [0, 1]
 * @param a > 0
 * @param b > 0
 * @returns in [0, 1]; NaN if an argument is out of range
 * @see Abramowitz & Stegun (1964), 26.5.8; evaluated by the method of Lentz (1976)
 */
export function incompleteBeta(x: number, a: number, b: number): number {
  if (!(x >= 0 && x <= 1 && a > 0 && b > 0)) return Number.NaN;
  if (x === 0 || x === 1) return x;
  const front = Math.exp(a * Math.log(x) + b * Math.log1p(-x) + gammaln(a + b) - gammaln(a) - gammaln(b));
  // The fraction converges fast on this side only; the other is its mirror image.
  if (x > (a + 1) / (a + b + 2)) return 1 - (front * fraction(1 - x, b, a)) / b;
  return (front * fraction(x, a, b)) / a;
}

function fraction(x: number, a: number, b: number): number {
  let c = 1;
  let d = 1 / away(1 - ((a + b) * x) / (a + 1));
  let h = d;
  for (let m = 1; m <= ITERATIONS_MAX; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / away(1 + even * d);
    c = away(1 + even / c);
    h *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / away(1 + odd * d);
    c = away(1 + odd / c);
    const factor = d * c;
    h *= factor;
    if (Math.abs(factor - 1) < 1e-16) break;
  }
  return h;
}

function away(value: number): number {
  return Math.abs(value) < TINY ? TINY : value;
}
