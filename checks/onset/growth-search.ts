/** Growth beyond this many e-folds over the baseline is no longer exponential and is cut back. */
const CLIP_EFOLDS = 6;
/** Grid: candidates a decade of growth rates, the fastest of them, e-folds a block, onsets, e-folds at saturation. */
const RATE_STEPS = 7;
const FASTEST = 4;
const ONSET_STEPS = 60;
const SATURATIONS = [Number.POSITIVE_INFINITY, 4, 2.5, 1.5, 0.8] as const;

/** A growth that rises out of the noise. Times are in blocks, at block centres; block 0 has its centre at 0. */
export interface Shape {
  /** Log scale of the noise, e-folds. */
  readonly base: number;
  /** E-folds a block. */
  readonly rate: number;
  /** Time at which growth and noise are equally strong. */
  readonly onset: number;
  /** Time at which it stops growing; infinite where it does not. */
  readonly saturation: number;
  readonly rss: number;
}

/** E-folds before the onset from which the growing part counts: earlier it adds less than 0.002. */
const TAIL_EFOLDS = 3;

/**
 * Sums of squares of the growth model against block log scales, and how to move to smaller ones. The level m is in closed
 * form; blocks well before an onset are summed once for all.
 */
export class GrowthSearch {
  readonly length: number;
  private readonly y: Float64Array;
  private readonly g: Float64Array;
  /** Sums of y and of its square from the start. */
  private readonly sums: Float64Array;
  private readonly squares: Float64Array;

  constructor(y: Float64Array) {
    this.y = y;
    this.length = y.length;
    this.g = new Float64Array(y.length);
    this.sums = new Float64Array(y.length + 1);
    this.squares = new Float64Array(y.length + 1);
    for (let j = 0; j < y.length; j++) {
      this.sums[j + 1] = this.sums[j]! + y[j]!;
      this.squares[j + 1] = this.squares[j]! + y[j]! * y[j]!;
    }
  }

  at({ onset, rate, saturation }: { onset: number; rate: number; saturation: number }): Shape {
    return this.evaluate(onset, rate, saturation);
  }

  grid(): Shape {
    const n = this.length;
    let best = this.evaluate(2, 1, Number.POSITIVE_INFINITY);
    const onsetStep = Math.max(1, n / ONSET_STEPS);
    const slowest = 1 / n;
    const rates = Math.ceil(RATE_STEPS * Math.log10(FASTEST / slowest));
    for (let r = 0; r <= rates; r++) {
      const rate = slowest * (FASTEST / slowest) ** (r / rates);
      for (let onset = 1; onset < n - 0.5; onset += onsetStep) {
        for (const folds of SATURATIONS) {
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
    return this.descend(from, 8, ({ onset, rate, saturation }) =>
      [1, -1].flatMap((sign): [number, number, number][] => {
        const later = onset + sign * steps.onset;
        return [
          [later, rate, saturation],
          [later, rate, saturation + sign * steps.onset],
          [onset, rate * steps.rate ** sign, saturation],
          [onset, rate, saturation + sign * steps.saturation],
        ];
      }),
    );
  }

  /** Best rate and saturation for a given onset, from a neighbouring solution. */
  profile(from: Shape): Shape {
    let best = this.evaluate(from.onset, from.rate, from.saturation);
    for (const factor of [1.3, 1.1, 1.03]) {
      best = this.descend(best, 12, ({ onset, rate, saturation }) => [
        [onset, rate * factor, saturation],
        [onset, rate / factor, saturation],
        [onset, rate, saturation + factor - 1],
        [onset, rate, saturation - factor + 1],
      ]);
    }
    return best;
  }

  residualCorrelation(fit: Shape): number {
    const start = this.shape(fit.onset, fit.rate, fit.saturation);
    let [cross, square] = [0, 0];
    let before = 0;
    for (let j = 0; j < this.length; j++) {
      const e = this.residual(j, fit.base) + (j < start ? this.g[j]! : 0);
      cross += e * before;
      square += e * e;
      before = e;
    }
    return square > 0 ? cross / square : 0;
  }

  private descend(from: Shape, passes: number, trials: (at: Shape) => [number, number, number][]): Shape {
    let best = from;
    for (let pass = 0; pass < passes; pass++) {
      const before = best.rss;
      for (const [onset, rate, saturation] of trials(best)) {
        const trial = this.evaluate(onset, rate, saturation);
        if (trial.rss < best.rss) best = trial;
      }
      if (best.rss >= before) break;
    }
    return best;
  }

  /** Fills the growing part of the shape; returns the first block at which it counts. */
  private shape(onset: number, rate: number, saturation: number): number {
    const start = Math.max(0, Math.min(this.length, Math.ceil(onset - TAIL_EFOLDS / rate)));
    for (let j = start; j < this.length; j++) {
      const folds = rate * (Math.min(j, saturation) - onset);
      this.g[j] = Math.min(CLIP_EFOLDS, folds > 10 ? folds : 0.5 * Math.log1p(Math.exp(2 * folds)));
      if (j < saturation) continue;
      this.g.fill(this.g[j]!, j + 1);
      break;
    }
    return start;
  }

  private residual(j: number, base: number): number {
    return Math.min(this.y[j]! - base, CLIP_EFOLDS) - this.g[j]!;
  }

  private evaluate(onset: number, rate: number, saturation: number): Shape {
    const n = this.length;
    if (saturation < onset || !(rate > 0) || rate > 2 * FASTEST) {
      return { base: 0, rate, onset, saturation, rss: Number.POSITIVE_INFINITY };
    }
    const start = this.shape(onset, rate, saturation);
    // The cut depends on m: start from the blocks before the onset, then two rounds of the mean residual.
    const count = Math.max(1, Math.min(n, Math.floor(onset)));
    let base = this.sums[count]! / count;
    for (let round = 0; round < 2; round++) {
      let sum = this.sums[start]! - start * base;
      for (let j = start; j < n; j++) sum += this.residual(j, base);
      base += sum / n;
    }
    let rss = Math.max(0, this.squares[start]! - 2 * base * this.sums[start]! + start * base * base);
    for (let j = start; j < n; j++) rss += this.residual(j, base) ** 2;
    return { base, rate, onset, saturation, rss };
  }
}
