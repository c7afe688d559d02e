/** A filter that takes out everything with the given periods: weights on lagged samples, scaled to unit noise gain. */
export interface LagPolynomial {
  /** Lags in samples, the first is 0. */
  readonly lags: Int32Array;
  readonly weights: Float64Array;
  /** Largest lag: samples of the past that the filter needs. */
  readonly reach: number;
}

/**
 * Seasonal differences, one for each period, scaled so that white noise keeps its variance.
 *
 *   r = Π(1 − L^{f·p_i}) x / sqrt(Σ c²),  L^q x_t = (1 − frac q)·x_{t−floor q} + frac q·x_{t−floor q−1}
 *
 * Limits: a period that is not whole is met by linear interpolation, which leaves a share of at most (π/m)²/2 of a
 * harmonic with m samples a cycle. Growth that is locked to a period is attenuated, by |1 − exp(σ·p)| for a rate σ.
 *
 * @param periods steps, each >= 2; none gives the identity
 * @param factor whole multiple f of each period to difference over
 */
export function lagPolynomial(periods: readonly number[], factor: number): LagPolynomial {
  let taps = new Map<number, number>([[0, 1]]);
  for (const period of periods) {
    const lag = period * factor;
    const whole = Math.floor(lag + 1e-9);
    const fraction = Math.max(0, lag - whole);
    const next = new Map(taps);
    const add = (at: number, weight: number) => next.set(at, (next.get(at) ?? 0) + weight);
    for (const [at, weight] of taps) {
      add(at + whole, -weight * (1 - fraction));
      if (fraction > 0) add(at + whole + 1, -weight * fraction);
    }
    taps = next;
  }
  const kept = [...taps].filter(([, weight]) => weight !== 0).sort(([a], [b]) => a - b);
  const norm = Math.sqrt(kept.reduce((sum, [, weight]) => sum + weight * weight, 0));
  return {
    lags: Int32Array.from(kept, ([lag]) => lag),
    weights: Float64Array.from(kept, ([, weight]) => weight / norm),
    reach: kept.at(-1)![0],
  };
}
