import type { Estimate } from "./estimate.ts";

/** A ratio with the ends of its interval, which need not lie symmetrically. */
export interface RatioInterval {
  readonly ratio: number;
  readonly low: number;
  readonly high: number;
}

/**
 * Ratio of two means with its interval, by Fieller's argument: the ratios q for which a − q·b is compatible with zero.
 *
 *   independent:  (a − q·b)² <= ha² + q²·hb²
 *   otherwise:    |a − q·b| <= ha + |q|·hb      (holds for any correlation)
 *
 * Fieller and not the delta method, because a baseline may be known poorly: the delta method then gives an interval that
 * is too short and symmetric, while Fieller's stays exact for normal means and says when no finite interval exists.
 *
 * Limits: as good as the half-widths are; for the unknown correlation too wide by a factor of up to sqrt(2).
 *
 * @param a numerator, half-width >= 0
 * @param b denominator, same confidence
 * @returns ratio within [low, high]; null where b is not told from zero at its confidence
 * @see Fieller (1954), Some problems in interval estimation
 */
export function ratioInterval(a: Estimate, b: Estimate, independent: boolean): RatioInterval | null {
  const size = Math.abs(b.mean);
  if (!(size > b.halfWidth) || !Number.isFinite(a.mean / b.mean)) return null;
  // Both divided by |b|, so that no square of a large or small load overflows.
  const q = a.mean / b.mean;
  const ha = a.halfWidth / size;
  const hb = b.halfWidth / size;
  return independent ? uncorrelated(q, ha, hb) : anyCorrelation(q, ha, hb);
}

/** Roots of (1 − hb²)·x² − 2q·x + (q² − ha²) = 0. */
function uncorrelated(q: number, ha: number, hb: number): RatioInterval {
  const lead = 1 - hb * hb;
  const root = Math.sqrt(Math.max(0, q * q * hb * hb + ha * ha * lead));
  return { ratio: q, low: (q - root) / lead, high: (q + root) / lead };
}

/** Division of the intervals: the worst of both ends. */
function anyCorrelation(q: number, ha: number, hb: number): RatioInterval {
  const low = q - ha;
  const high = q + ha;
  return {
    ratio: q,
    low: low < 0 ? low / (1 - hb) : low / (1 + hb),
    high: high < 0 ? high / (1 + hb) : high / (1 - hb),
  };
}
