import { AppError } from "../../orchestrator/contract/index.ts";

/**
 * Refuses series that no estimator here can speak about, so that a NaN never travels silently into a load.
 *
 * @param x shape [n]
 * @param estimator name for the message
 * @param samplesMin fewest samples that the estimator needs
 * @throws HISTORY_INVALID if n < samplesMin, or for the first value that is NaN or infinite
 */
export function requireFinite(x: Float64Array, estimator: string, samplesMin: number): void {
  if (x.length < samplesMin)
    throw new AppError("HISTORY_INVALID", `${estimator} got ${x.length} samples`, {
      fix: `give at least ${samplesMin}`,
    });
  const bad = firstNonFinite(x);
  if (bad !== null)
    throw new AppError("NON_FINITE", `${estimator} got ${x[bad]} among its samples`, {
      where: `sample ${bad}`,
      fix: "judge only the stretch before it",
    });
}

/**
 * Index of the first sample that is NaN or infinite; null if there is none.
 *
 * @param x shape [n], n >= 0
 */
export function firstNonFinite(x: Float64Array): number | null {
  for (let i = 0; i < x.length; i++) if (!Number.isFinite(x[i]!)) return i;
  return null;
}
