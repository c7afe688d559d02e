import { autocovariance } from "./autocovariance.ts";

/** A fitted autoregression x_t − x̄ = Σ φ_j (x_{t−j} − x̄) + e_t. */
export interface Autoregression {
  readonly order: number;
  /** φ_1 … φ_order. */
  readonly coefficients: readonly number[];
  /** Variance of e, unit of x squared. */
  readonly innovationVariance: number;
}

/**
 * Autoregression by the Yule–Walker equations, order chosen by Akaike's criterion.
 *
 *   Levinson–Durbin on the biased autocovariances; AIC(p) = n ln v_p + 2p; innovation variance v_p · n/(n − p − 1)
 *
 * Limits: with strong correlation and few samples the coefficients are too small, hence the long-run variance too
 * small. A series without variance gets order 0 and innovation variance 0.
 *
 * @param x shape [n], n >= 4, finite
 * @param orderMax largest order tried, by default ⌊10 log10 n⌋
 * @returns order <= orderMax, coefficients of a stationary process
 * @throws HISTORY_INVALID, NON_FINITE
 * @see Durbin (1960), The fitting of time-series models; Akaike (1974); defaults are those of R's ar.yw
 */
export function autoregression(
  x: Float64Array,
  orderMax = Math.floor(10 * Math.log10(x.length)),
): Autoregression {
  const n = x.length;
  const gamma = autocovariance(x, Math.min(n - 2, orderMax));
  let best = { order: 0, phi: [] as number[], v: gamma[0]! };
  if (!(best.v > 0)) return { order: 0, coefficients: [], innovationVariance: 0 };
  let aicMin = n * Math.log(best.v);
  let phi: number[] = [];
  let v = best.v;
  for (let p = 1; p < gamma.length; p++) {
    const reflection = partial(gamma, phi, v);
    phi = [...phi.map((value, j) => value - reflection * phi[p - 2 - j]!), reflection];
    v *= 1 - reflection * reflection;
    // Rounding can bring a noise-free series here; beyond this order there is nothing left to predict.
    if (!(v > 0)) break;
    const aic = n * Math.log(v) + 2 * p;
    if (aic < aicMin) {
      aicMin = aic;
      best = { order: p, phi, v };
    }
  }
  const innovationVariance = (best.v * n) / (n - best.order - 1);
  return { order: best.order, coefficients: best.phi, innovationVariance };
}

function partial(gamma: Float64Array, phi: readonly number[], v: number): number {
  const p = phi.length + 1;
  let sum = gamma[p]!;
  for (let j = 0; j < phi.length; j++) sum -= phi[j]! * gamma[p - 1 - j]!;
  return sum / v;
}
