import { linearRegression, studentTCdf, studentTQuantile } from "../estimators/index.ts";
import type { MeanInterval } from "./mean-interval.ts";

/** The interval widened for a start-up that decays like 1/t and has not yet died out. */
export interface GuardedInterval {
  readonly value: number;
  readonly halfWidth: number;
  /** t of the 1/t term, and its two-sided p. */
  readonly t: number;
  readonly p: number;
}

/**
 * Union of the interval of the mean and of the interval of the level that is left when a 1/t tail is fitted.
 *
 *   b_j = level + a · ⟨1/t⟩_j + e_j, least squares over the batches; t counts from the impulsive start
 *
 * Limits: tails slower than 1/t are not covered. Where the window begins late, 1/t hardly varies over it and the fit is
 * wide: the guard then costs more than it saves.
 *
 * @param interval of the plain mean
 * @param inverseTimes shape [B], the average of 1/t over each batch
 * @param confidence in (0.5, 1)
 * @returns centre and half-width of the union, unit of the batches
 * @throws HISTORY_INVALID if there are fewer than 3 batches
 */
export function tailGuard(
  interval: MeanInterval,
  inverseTimes: Float64Array,
  confidence: number,
): GuardedInterval {
  const fit = linearRegression(inverseTimes, interval.batches);
  const widen = Math.sqrt(interval.inflation);
  const df = interval.batches.length - 2;
  const reach = studentTQuantile((1 + confidence) / 2, df) * fit.interceptSe * widen;
  const t = fit.t / widen;
  const low = Math.min(interval.mean - interval.halfWidth, fit.intercept - reach);
  const high = Math.max(interval.mean + interval.halfWidth, fit.intercept + reach);
  return { value: (low + high) / 2, halfWidth: (high - low) / 2, t, p: 2 * studentTCdf(-Math.abs(t), df) };
}
