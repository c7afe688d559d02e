import { type Autoregression, leastSquares } from "../estimators/index.ts";

/** Start-up shapes that a record may prefer. */
export type StartUpShape = "inverse" | "exponential" | "both";

/** The level of a record beside the start-up that fits it best. */
export interface LevelBesideStartUp {
  readonly level: number;
  /** Standard error with the shape taken as known, unit of the blocks. */
  readonly se: number;
  readonly shape: StartUpShape;
  /** A straight trend over the same stretch, in its standard errors, if it fits better than any start-up; else null. */
  readonly trendT: number | null;
}

const TIME_CONSTANTS = 9;
/** Longest time constant, as a share of the record: what is slower is not over within the third that start-up may take. */
const LONGEST_SHARE = 1 / 10;
const SHORTEST_SHARE = 1 / 100;
/** Fewest prewhitened blocks for a fit with one decaying term, and with two. */
const BLOCKS_MIN = 8;
const BLOCKS_EXPONENTIAL_MIN = 20;
/** Gain in χ² at which an exponential takes the place of 1/t, and at which 1/t is kept beside it (5 % of χ², 1 degree). */
const EXPONENTIAL_GAIN = 4.5;
const INVERSE_GAIN = 3.84;

/**
 * Level of a record jointly with its start-up, all but the first 2 % of it used.
 *
 *   y = level + b/t, or level + a·exp(−t/τ), or level + a·exp(−t/τ) + b/t; generalised least squares by prewhitening with
 *   the autoregression of the noise; τ the best of 9 values from m/100 to m/10 blocks; the 1/t shape unless an exponential
 *   fits better by 4.5 in χ², and both if 1/t then still gains 3.84
 *
 * Limits: tails slower than 1/t and start-ups of another kind are only covered as far as these shapes imitate them; the
 * error of τ is left out, so that the interval has to be joined with the one of the cut record.
 *
 * @param blocks shape [m], m >= 8, finite, from the impulsive start on
 * @param inverseTimes shape [m], the average of 1/t over each block
 * @param noise autoregression of the stretch after the start-up less its own trend, unit of the blocks
 * @returns null where there are too few blocks or no noise to measure by
 * @see Cochrane & Orcutt (1949), for prewhitening (from memory); choice and limits: our own, measured by simulation
 */
export function levelBesideStartUp(
  blocks: Float64Array,
  inverseTimes: Float64Array,
  noise: Autoregression,
): LevelBesideStartUp | null {
  const m = blocks.length;
  const from = Math.max(1, Math.floor(m / 50));
  const v = noise.innovationVariance;
  if (!(v > 0) || m - from - noise.order < BLOCKS_MIN) return null;
  const y = prewhitened(blocks.subarray(from), noise);
  const one = new Float64Array(y.length).fill(1 - noise.coefficients.reduce((sum, phi) => sum + phi, 0));
  const inverse = prewhitened(inverseTimes.subarray(from), noise);
  const shapes = y.length < BLOCKS_EXPONENTIAL_MIN ? [] : decays(m, y.length, noise);
  const chosen = choose((regressors) => fitted(y, [one, ...regressors], v), inverse, shapes);
  if (chosen === null) return null;
  return {
    level: chosen.level,
    se: chosen.se,
    shape: chosen.shape,
    trendT: trendInstead(y, one, chosen.chi, v),
  };
}

interface Fit {
  readonly level: number;
  readonly se: number;
  readonly chi: number;
}

function fitted(y: Float64Array, columns: readonly Float64Array[], v: number): Fit | null {
  const fit = leastSquares(y, columns);
  if (fit === null) return null;
  const se = Math.sqrt(v * fit.leverages[0]!);
  return { level: fit.coefficients[0]!, se, chi: fit.residualSquares / v };
}

function choose(
  solve: (regressors: readonly Float64Array[]) => Fit | null,
  inverse: Float64Array,
  shapes: readonly Float64Array[],
): (Fit & { readonly shape: StartUpShape }) | null {
  const best = (fits: readonly (Fit | null)[]): Fit | null =>
    fits.reduce(
      (least, one) => (one !== null && (least === null || one.chi < least.chi) ? one : least),
      null,
    );
  const inverseOnly = solve([inverse]);
  const exponential = best(shapes.map((shape) => solve([shape])));
  if (inverseOnly === null) return null;
  if (exponential === null || inverseOnly.chi - exponential.chi <= EXPONENTIAL_GAIN)
    return { ...inverseOnly, shape: "inverse" };
  const both = best(shapes.map((shape) => solve([shape, inverse])));
  return both !== null && exponential.chi - both.chi > INVERSE_GAIN
    ? { ...both, shape: "both" }
    : { ...exponential, shape: "exponential" };
}

/** A drift that no start-up explains: the straight line alone fits better than the best start-up. */
function trendInstead(y: Float64Array, one: Float64Array, chi: number, v: number): number | null {
  const ramp = Float64Array.from(y, (_, i) => i - (y.length - 1) / 2);
  const line = leastSquares(y, [one, ramp]);
  if (line === null || line.residualSquares / v >= chi) return null;
  return line.coefficients[1]! / Math.sqrt(v * line.leverages[1]!);
}

/** What the autoregression can't foretell from the blocks before; shorter by its order. */
function prewhitened(x: Float64Array, { coefficients, order }: Autoregression): Float64Array {
  const out = new Float64Array(x.length - order);
  for (let i = 0; i < out.length; i++) {
    let value = x[i + order]!;
    for (let j = 0; j < order; j++) value -= coefficients[j]! * x[i + order - 1 - j]!;
    out[i] = value;
  }
  return out;
}

/** Exponentials over the prewhitened blocks: prewhitening only multiplies them, so that it can be left out. */
function decays(m: number, length: number, { order }: Autoregression): Float64Array[] {
  const shapes: Float64Array[] = [];
  for (let k = 0; k < TIME_CONSTANTS; k++) {
    const keep = Math.exp(
      -1 / (m * SHORTEST_SHARE * (LONGEST_SHARE / SHORTEST_SHARE) ** (k / (TIME_CONSTANTS - 1))),
    );
    const shape = new Float64Array(length);
    let value = keep ** order;
    for (let i = 0; i < length; i++) {
      shape[i] = value;
      value = value > 1e-200 ? value * keep : 0;
    }
    shapes.push(shape);
  }
  return shapes;
}
