/** A change at one sample. */
export interface ChangePoint {
  /** First sample after the change. */
  readonly index: number;
  /** What the change explains: twice the gain in log likelihood. */
  readonly gain: number;
  /** First and last index whose fit is not rejected. */
  readonly band: readonly [number, number];
}

/**
 * Rejection limit of twice the log likelihood for the place of a break, 95 %: −2·ln(1 − sqrt(0.95)) = 7.35. A place is
 * no regular parameter, so the 3.84 of chi square would be too narrow.
 *
 * @see Hansen (2000), Sample splitting and threshold estimation, Econometrica 68, theorem 2 and table 1 (from memory)
 */
const BREAK_LIMIT_95 = -2 * Math.log(1 - Math.sqrt(0.95));

/**
 * Most likely sample of one change of a normal series, with the model that the cost names.
 *
 *   gain_k = cost(from, to) − cost(from, k) − cost(k, to),  cost = −2·max log likelihood
 *   band: all k with gain_k >= gain_max − 7.35·inflation, as one interval
 *
 * Limits: assumes independent values; with correlation pass the inflation (1 + ρ)/(1 − ρ).
 *
 * @param cost of the samples from a (in) to b (out)
 * @param options.shortest least number of samples on either side
 */
export function bestChange(
  cost: (a: number, b: number) => number,
  options: { from: number; to: number; shortest: number; inflation?: number },
): ChangePoint {
  const { from, to, shortest, inflation = 1 } = options;
  const whole = cost(from, to);
  const gains: number[] = [];
  let best = from + shortest;
  let most = Number.NEGATIVE_INFINITY;
  for (let k = from + shortest; k <= to - shortest; k++) {
    const gain = whole - cost(from, k) - cost(k, to);
    gains.push(gain);
    if (gain > most) [most, best] = [gain, k];
  }
  const limit = most - BREAK_LIMIT_95 * Math.max(1, inflation);
  const first = gains.findIndex((g) => g >= limit);
  const last = gains.findLastIndex((g) => g >= limit);
  return { index: best, gain: most, band: [from + shortest + first, from + shortest + last] };
}

/** Sums from the start, so that the moments of any stretch cost nothing. Values are taken less `centre`. */
function momentSums(values: Float64Array, centre: number): { first: Float64Array; second: Float64Array } {
  const first = new Float64Array(values.length + 1);
  const second = new Float64Array(values.length + 1);
  for (let i = 0; i < values.length; i++) {
    const v = values[i]! - centre;
    first[i + 1] = first[i]! + v;
    second[i + 1] = second[i]! + v * v;
  }
  return { first, second };
}

/** Cost of a stretch whose mean and variance are both its own: n·ln s², maximum-likelihood variance. */
export function meanVarianceCost(values: Float64Array): (a: number, b: number) => number {
  const { first, second } = momentSums(values, meanOf(values));
  return (a, b) => {
    const n = b - a;
    const mean = (first[b]! - first[a]!) / n;
    return n * Math.log(Math.max((second[b]! - second[a]!) / n - mean * mean, Number.MIN_VALUE));
  };
}

/** Cost of a stretch about a known level: n·ln of the mean square, plus a floor. */
export function meanSquareCost(
  values: Float64Array,
  level: number,
  floor: number,
): (a: number, b: number) => number {
  const { second } = momentSums(values, level);
  return (a, b) => {
    const n = b - a;
    return n * Math.log(Math.max((second[b]! - second[a]!) / n + floor * floor, Number.MIN_VALUE));
  };
}

/** Cost of a stretch whose mean is its own, with one variance known for all: residual sum of squares over it. */
export function meanCost(values: Float64Array, variance: number): (a: number, b: number) => number {
  const { first, second } = momentSums(values, meanOf(values));
  return (a, b) => {
    const sum = first[b]! - first[a]!;
    return Math.max(0, second[b]! - second[a]! - (sum * sum) / (b - a)) / variance;
  };
}

function meanOf(values: Float64Array): number {
  return values.reduce((a, b) => a + b, 0) / Math.max(1, values.length);
}
