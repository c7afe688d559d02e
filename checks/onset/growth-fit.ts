import { GrowthSearch, type Shape } from "./growth-search.ts";

/** Rounds of refinement, each with half the steps of the one before. */
const REFINEMENTS = 12;

/** A fitted growth with the correlation that its residuals keep. */
export interface GrowthFit extends Shape {
  /** Correlation of neighbouring residuals. */
  readonly correlation: number;
}

/**
 * Fits an exponential growth over a noise floor to block log scales, by least squares.
 *
 *   y = m + ½·ln(1 + exp(2σ·(min(t, t_sat) − t_on))), y − m cut back to 6
 *
 * Grid over onset, rate and saturation, m in closed form; then coordinate steps that halve.
 *
 * Limits: at least 6 blocks; a growth that spans fewer than 2 blocks has no rate that can be told.
 *
 * @param y shape [n], finite, e-folds
 * @param near where to begin instead of on the grid
 */
export function fitGrowth(
  y: Float64Array,
  near?: { onset: number; rate: number; saturation: number },
): GrowthFit {
  const search = new GrowthSearch(y);
  let best = near === undefined ? search.grid() : search.at(near);
  const steps = { onset: 1, rate: 1.25, saturation: 1 };
  for (let i = 0; i < REFINEMENTS; i++) {
    best = search.refine(best, steps);
    steps.onset /= 2;
    steps.saturation /= 2;
    steps.rate = Math.sqrt(steps.rate);
  }
  return { ...best, correlation: search.residualCorrelation(best) };
}

/**
 * Band of onsets that the fit does not reject: the profile of the sum of squares.
 *
 *   RSS(t_on) <= RSS_min·(1 + 3.84·2.5·(1 + ρ)/(1 − ρ)/(n − 4)),  ρ = correlation of residuals in 0..0.9
 *
 * @returns first and last time, blocks
 */
export function onsetBand(y: Float64Array, fit: GrowthFit): readonly [number, number] {
  const rho = Math.max(0, Math.min(0.9, fit.correlation));
  const inflation = (3.84 * 2.5 * (1 + rho)) / (1 - rho) / Math.max(1, y.length - 4);
  const limit = fit.rss * (1 + inflation) + 1e-12;
  const search = new GrowthSearch(y);
  return [edge(search, fit, limit, -1), edge(search, fit, limit, 1)];
}

/** Walks outwards in quarter blocks while the profile stays within the limit. */
function edge(search: GrowthSearch, fit: GrowthFit, limit: number, direction: 1 | -1): number {
  let inside = fit.onset;
  let shape: Shape = fit;
  for (let step = 1; step <= 4 * search.length; step++) {
    const onset = fit.onset + (direction * step) / 4;
    if (onset < 0 || onset > search.length - 1) break;
    shape = search.profile({ ...shape, onset });
    if (shape.rss > limit) break;
    inside = onset;
  }
  return inside;
}
