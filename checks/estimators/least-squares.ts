/** A linear least-squares fit with few regressors. */
interface LeastSquares {
  /** One a regressor. */
  readonly coefficients: readonly number[];
  /** Diagonal of (XᵀX)⁻¹: the coefficients' variances for residuals of unit variance. */
  readonly leverages: readonly number[];
  readonly residualSquares: number;
}

/**
 * Linear least squares on a handful of regressors, by the normal equations with pivoting.
 *
 *   minimise Σ_i (y_i − Σ_j c_j X_{ji})²
 *
 * Limits: loses twice the digits that the regressors' likeness costs, so that regressors that agree to 1e-6 are refused.
 *
 * @param y shape [n], finite
 * @param regressors k rows of shape [n], k <= 4, n > k
 * @returns null where the regressors can't be told apart
 */
export function leastSquares(y: Float64Array, regressors: readonly Float64Array[]): LeastSquares | null {
  const k = regressors.length;
  const gram = regressors.map((a) => regressors.map((b) => dot(a, b)));
  const right = regressors.map((a) => dot(a, y));
  const inverse = inverted(gram);
  if (inverse === null) return null;
  const coefficients = inverse.map((row) => row.reduce((sum, value, j) => sum + value * right[j]!, 0));
  let residualSquares = 0;
  for (let i = 0; i < y.length; i++) {
    let rest = y[i]!;
    for (let j = 0; j < k; j++) rest -= coefficients[j]! * regressors[j]![i]!;
    residualSquares += rest * rest;
  }
  return { coefficients, leverages: inverse.map((row, j) => row[j]!), residualSquares };
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}

/** Gauss and Jordan with pivoting on the matrix scaled to a unit diagonal. */
function inverted(matrix: readonly (readonly number[])[]): number[][] | null {
  const k = matrix.length;
  const scale = matrix.map((row, i) => Math.sqrt(row[i]!));
  if (scale.some((s) => !(s > 0))) return null;
  const work = matrix.map((row, i) => [
    ...row.map((value, j) => value / (scale[i]! * scale[j]!)),
    ...row.map((_, j) => (i === j ? 1 : 0)),
  ]);
  for (let i = 0; i < k; i++) {
    let pivot = i;
    for (let r = i + 1; r < k; r++) if (Math.abs(work[r]![i]!) > Math.abs(work[pivot]![i]!)) pivot = r;
    [work[i], work[pivot]] = [work[pivot]!, work[i]!];
    const head = work[i]![i]!;
    if (Math.abs(head) < 1e-12) return null;
    work[i] = work[i]!.map((value) => value / head);
    for (let r = 0; r < k; r++) {
      const factor = work[r]![i]!;
      if (r !== i) work[r] = work[r]!.map((value, c) => value - factor * work[i]![c]!);
    }
  }
  return work.map((row, i) => row.slice(k).map((value, j) => value / (scale[i]! * scale[j]!)));
}
