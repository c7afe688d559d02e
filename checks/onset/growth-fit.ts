/** Growth beyond this many e-folds over the baseline is no longer exponential and is cut back. */
const CLIP_EFOLDS = 6;
/** Candidates a decade of growth rates. */
const RATE_STEPS = 10;
const REFINEMENTS = 12;

/** A growth that rises out of the noise. Times are in blocks, at block centres; block 0 has its centre at 0. */
export interface GrowthFit {
  /** Log scale of the noise, e-folds. */
  readonly base: number;
  /** E-folds a block. */
  readonly rate: number;
  /** Time at which growth and noise are equally strong. */
  readonly onset: number;
  /** Time at which it stops growing; infinite where it does not. */
  readonly saturation: number;
  readonly rss: number;
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
 */
export function fitGrowth(y: Float64Array): GrowthFit {
  const search = new GrowthSearch(y);
  let best = search.grid();
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

type Shape = Omit<GrowthFit, "correlation">;

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

class GrowthSearch {
  readonly length: number;
  private readonly y: Float64Array;
  private readonly g: Float64Array;

  constructor(y: Float64Array) {
    this.y = y;
    this.length = y.length;
    this.g = new Float64Array(y.length);
  }

  grid(): Shape {
    const n = this.length;
    let best = this.evaluate(2, 1, Number.POSITIVE_INFINITY);
    const onsetStep = Math.max(1, n / 80);
    const slowest = 1 / n;
    const rates = Math.ceil(RATE_STEPS * Math.log10(4 / slowest));
    for (let r = 0; r <= rates; r++) {
      const rate = slowest * (4 / slowest) ** (r / rates);
      for (let onset = 1; onset < n - 0.5; onset += onsetStep) {
        for (const folds of [Number.POSITIVE_INFINITY, 4, 2.5, 1.5, 0.8]) {
          const saturation = onset + folds / rate;
          if (Number.isFinite(saturation) && saturation > n) continue;
          const trial = this.evaluate(onset, rate, saturation);
          if (trial.rss < best.rss) best = trial;
        }
      }
    }
    return best;
  }

  refine(from: Shape, steps: { onset: number; rate: number; saturation: number }): Shape {
    let best = from;
    for (let pass = 0; pass < 8; pass++) {
      const before = best.rss;
      for (const sign of [1, -1]) {
        const { onset, rate, saturation } = best;
        const later = onset + sign * steps.onset;
        const trials = [
          this.evaluate(later, rate, saturation),
          this.evaluate(later, rate, saturation + sign * steps.onset),
          this.evaluate(onset, rate * steps.rate ** sign, saturation),
          this.evaluate(onset, rate, saturation + sign * steps.saturation),
        ];
        for (const trial of trials) if (trial.rss < best.rss) best = trial;
      }
      if (best.rss >= before) break;
    }
    return best;
  }

  /** Best rate and saturation for a given onset, from a neighbouring solution. */
  profile(from: Shape): Shape {
    let best = this.evaluate(from.onset, from.rate, from.saturation);
    for (const factor of [1.3, 1.1, 1.03]) {
      for (let pass = 0; pass < 12; pass++) {
        const { onset, rate, saturation } = best;
        const before = best.rss;
        for (const trial of [
          this.evaluate(onset, rate * factor, saturation),
          this.evaluate(onset, rate / factor, saturation),
          this.evaluate(onset, rate, saturation + factor - 1),
          this.evaluate(onset, rate, saturation - factor + 1),
        ]) {
          if (trial.rss < best.rss) best = trial;
        }
        if (best.rss >= before) break;
      }
    }
    return best;
  }

  residualCorrelation(fit: Shape): number {
    this.shape(fit.onset, fit.rate, fit.saturation);
    let [cross, square] = [0, 0];
    let before = 0;
    for (let j = 0; j < this.length; j++) {
      const e = this.residual(j, fit.base);
      cross += e * before;
      square += e * e;
      before = e;
    }
    return square > 0 ? cross / square : 0;
  }

  private shape(onset: number, rate: number, saturation: number): void {
    for (let j = 0; j < this.length; j++) {
      const folds = rate * (Math.min(j, saturation) - onset);
      this.g[j] = Math.min(CLIP_EFOLDS, folds > 20 ? folds : 0.5 * Math.log1p(Math.exp(2 * folds)));
    }
  }

  private residual(j: number, base: number): number {
    return Math.min(this.y[j]! - base, CLIP_EFOLDS) - this.g[j]!;
  }

  private evaluate(onset: number, rate: number, saturation: number): Shape {
    const n = this.length;
    if (saturation < onset || !(rate > 0) || rate > 8) {
      return { base: 0, rate, onset, saturation, rss: Number.POSITIVE_INFINITY };
    }
    this.shape(onset, rate, saturation);
    // The cut depends on m: start from the blocks before the onset, then two rounds of the mean residual.
    let base = this.meanBefore(onset);
    for (let round = 0; round < 2; round++) {
      let sum = 0;
      for (let j = 0; j < n; j++) sum += this.residual(j, base);
      base += sum / n;
    }
    let rss = 0;
    for (let j = 0; j < n; j++) rss += this.residual(j, base) ** 2;
    return { base, rate, onset, saturation, rss };
  }

  private meanBefore(onset: number): number {
    const count = Math.max(1, Math.min(this.length, Math.floor(onset)));
    let sum = 0;
    for (let j = 0; j < count; j++) sum += this.y[j]!;
    return sum / count;
  }
}
