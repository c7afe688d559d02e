/**
 * Lift after a sudden start over its final value, two-dimensional, by R. T. Jones's approximation of Wagner's function.
 *
 *   φ(s) = 1 - 0.165 e^{-0.0455 s} - 0.335 e^{-0.3 s},  s semi-chords flown; within 1 % of the exact function
 *
 * @see Wagner (1925); R. T. Jones (1940), NACA Report 681 (constants from memory)
 */
export const wagner = (s: number): number => 1 - 0.165 * Math.exp(-0.0455 * s) - 0.335 * Math.exp(-0.3 * s);

/**
 * Theodorsen's function C(k) = F + iG, from Bessel functions by their integrals.
 *
 *   F = [J1 (J1 + Y0) + Y1 (Y1 - J0)] / D,  G = -(Y1 Y0 + J1 J0) / D,  D = (J1 + Y0)² + (Y1 - J0)²
 *
 * @see Theodorsen (1935), NACA Report 496 (from memory)
 */
export function theodorsen(k: number): { f: number; g: number } {
  const [j0, j1, y0, y1] = [besselJ(0, k), besselJ(1, k), besselY(0, k), besselY(1, k)];
  const d = (j1 + y0) ** 2 + (y1 - j0) ** 2;
  return { f: (j1 * (j1 + y0) + y1 * (y1 - j0)) / d, g: -(y1 * y0 + j1 * j0) / d };
}

/** J_n(x) = 1/π ∫ cos(nt - x sin t) dt over 0..π (DLMF 10.9.2). */
function besselJ(n: number, x: number): number {
  return midpointSum((t) => Math.cos(n * t - x * Math.sin(t)), Math.PI, 2000) / Math.PI;
}

/** Y_n(x) = 1/π ∫ sin(x sin t - nt) dt - 1/π ∫ (e^{nt} + (-1)^n e^{-nt}) e^{-x sinh t} dt (DLMF 10.9.7). */
function besselY(n: number, x: number): number {
  const first = midpointSum((t) => Math.sin(x * Math.sin(t) - n * t), Math.PI, 2000);
  const sign = n % 2 === 0 ? 1 : -1;
  const second = midpointSum(
    (t) => (Math.exp(n * t) + sign * Math.exp(-n * t)) * Math.exp(-x * Math.sinh(t)),
    12,
    20_000,
  );
  return (first - second) / Math.PI;
}

function midpointSum(f: (t: number) => number, to: number, n: number): number {
  let sum = 0;
  for (let i = 0; i < n; i++) sum += f(((i + 0.5) / n) * to);
  return (sum * to) / n;
}
