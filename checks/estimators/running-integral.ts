/**
 * Integral of a series from its first sample to any place between samples, by the trapezoidal rule on the straight
 * lines between samples.
 *
 *   I(s) = ∫_0^s x du, u in samples
 *
 * Limits: exact for the piecewise linear series; of the smooth one it averages, over whole periods of P samples, all
 * harmonics away to about their height times (k/P)⁴.
 *
 * @param x shape [n], n >= 1, finite; taken about its first value to keep digits
 * @returns a function of s in [0, n − 1], unit of x times samples
 */
export function runningIntegral(x: Float64Array): (s: number) => number {
  const base = x[0] ?? 0;
  const upTo = new Float64Array(x.length);
  for (let i = 1; i < x.length; i++) upTo[i] = upTo[i - 1]! + (x[i]! + x[i - 1]! - 2 * base) / 2;
  return (s) => {
    const i = Math.min(Math.floor(s), x.length - 2);
    if (i < 0) return 0;
    const f = s - i;
    const left = x[i]! - base;
    return upTo[i]! + f * (left + (f * (x[i + 1]! - x[i]!)) / 2) + base * s;
  };
}
