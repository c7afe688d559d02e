/** Factor of safety for an order observed on three levels (Roache 1994; Celik et al. 2008). */
export const SAFETY_THREE_GRIDS = 1.25;
/** Factor of safety where the order is assumed, with two levels only (Roache 1994). */
export const SAFETY_TWO_GRIDS = 3;

/**
 * Grid convergence index of the finer of two levels: an error band for what refinement would still change.
 *
 *   GCI = Fs·|φ2 − φ1| / (r^p − 1)
 *
 * in the unit of φ; published tables give it as a share of |φ1|. The often quoted check GCI32/(r^p·GCI21) ≈ 1 is no check
 * when p comes from the same three levels: it is φ1/φ2 then, whatever the levels do.
 *
 * Limits: an estimate that covers in about 95 % of the studies on which the factors were tuned, not a confidence
 * interval; it contains nothing of the statistical half-width.
 *
 * @param change φ2 − φ1, the coarser value less the finer one
 * @param ratio r = h2/h1 > 1
 * @param order p > 0
 * @returns >= 0
 * @see Roache (1994), J. Fluids Eng. 116, 405–413
 */
export function gridConvergenceIndex(
  change: number,
  { ratio, order, safety }: { readonly ratio: number; readonly order: number; readonly safety: number },
): number {
  return (safety * Math.abs(change)) / Math.expm1(order * Math.log(ratio));
}
