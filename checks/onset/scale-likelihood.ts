/** A fluctuation whose strength follows a growth out of the noise. */
export interface GrowingScale {
  /** Sample at which growth and noise are equally strong. */
  readonly onset: number;
  /** E-folds a step. */
  readonly rate: number;
  /** Sample at which it stops growing. */
  readonly saturation: number;
}

/**
 * Twice the log likelihood of normal values whose variance follows a growth, at the best noise level, less constants.
 *
 *   v_t = s²·(1 + exp(2σ·(min(t, t_sat) − t_on))),  2 ln L = −Σ ln v_t − n,  s² = mean e²/(v_t/s²)
 *
 * @param e shape [>= to], finite from `from` to `to`
 * @param floor size added to the values, so that a noise-free stretch has a likelihood
 */
export function growingScaleLikelihood(
  e: Float64Array,
  stretch: { from: number; to: number; floor: number },
  growth: GrowingScale,
): number {
  const { from, to, floor } = stretch;
  let [logs, ratio] = [0, 0];
  for (let t = from; t < to; t++) {
    const folds = Math.min(30, growth.rate * (Math.min(t, growth.saturation) - growth.onset));
    const strength = 1 + Math.exp(2 * folds);
    logs += Math.log(strength);
    ratio += (e[t]! * e[t]! + floor * floor) / strength;
  }
  const n = to - from;
  return -logs - n * Math.log(Math.max(ratio / n, Number.MIN_VALUE)) - n;
}
