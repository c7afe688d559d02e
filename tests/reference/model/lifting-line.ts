/**
 * Prandtl's lifting line, solved with Glauert's sine series at n stations.
 *
 *   Σ A_m sin mθ (μ m + sin θ) = μ α sin θ,  μ = a0 c(θ) / 4b,  CL = π AR A1,  CDi = π AR Σ m A_m²
 *
 * A program of its own: it shares nothing with the model under test.
 *
 * @param chord chord over span at η = 2y/b
 * @returns lift slope, 1/rad, and span efficiency
 * @see Glauert (1926), The Elements of Aerofoil and Airscrew Theory, ch. 11 (from memory)
 */
export function liftingLine(
  chord: (eta: number) => number,
  aspectRatio: number,
  n = 60,
): { slope: number; efficiency: number } {
  // Odd terms only: the loading is symmetric.
  const rows = Array.from({ length: n }, (_, i) => {
    const theta = ((i + 1) * Math.PI) / (2 * n + 1);
    const mu = (2 * Math.PI * chord(Math.cos(theta))) / 4;
    const row = Array.from({ length: n }, (_, j) => {
      const m = 2 * j + 1;
      return Math.sin(m * theta) * (mu * m + Math.sin(theta));
    });
    return [...row, mu * Math.sin(theta)];
  });
  const a = solve(rows);
  const squares = a.reduce((sum, value, j) => sum + (2 * j + 1) * value * value, 0);
  return { slope: Math.PI * aspectRatio * a[0]!, efficiency: a[0]! ** 2 / squares };
}

/** Gauss's elimination with pivots, of rows that hold their right side last. */
function solve(rows: number[][]): number[] {
  const n = rows.length;
  for (let k = 0; k < n; k++) {
    const pivot = rows.slice(k).reduce((best, row, i) => {
      return Math.abs(row[k]!) > Math.abs(rows[best]![k]!) ? k + i : best;
    }, k);
    [rows[k], rows[pivot]] = [rows[pivot]!, rows[k]!];
    for (let i = k + 1; i < n; i++) {
      const factor = rows[i]![k]! / rows[k]![k]!;
      for (let j = k; j <= n; j++) rows[i]![j] = rows[i]![j]! - factor * rows[k]![j]!;
    }
  }
  const x = new Array<number>(n).fill(0);
  for (let i = n - 1; i >= 0; i--) {
    const known = x.reduce((sum, value, j) => sum + rows[i]![j]! * value, 0);
    x[i] = (rows[i]![n]! - known) / rows[i]![i]!;
  }
  return x;
}
