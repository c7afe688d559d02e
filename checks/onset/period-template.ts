/** Cycles of a period that the baseline has to show before its shape is taken out. */
const CYCLES_MIN = 3;
/** Passes over the periods; each takes out what the others left. */
const PASSES = 2;

/** The stretch from which the shape of the periods is learnt. */
export interface BaselineStretch {
  readonly from: number;
  /** First sample that no longer belongs to it. */
  readonly to: number;
}

/**
 * Takes the shape of each declared period out of a signal, as learnt from its baseline.
 *
 *   e_t = x_t − Σ_i T_i(phase_i t),  T_i = mean over the baseline of what the others leave, by phase, with mean 0
 *
 * A period of p steps has ceil(p) phases; one that is not whole is read by linear interpolation between phases.
 *
 * Limits: a shape learnt from c cycles carries 1/sqrt(c) of the noise; a period with fewer than 3 cycles in the
 * baseline is left in.
 *
 * @param x shape [n], finite from `baseline.from` to `end`
 * @param options.end first sample that is not wanted
 * @returns shape [n]: NaN outside from..end
 */
export function removePeriods(
  x: Float64Array,
  periods: readonly number[],
  baseline: BaselineStretch,
  end: number,
): Float64Array {
  const e = new Float64Array(x.length).fill(Number.NaN);
  for (let t = baseline.from; t < end; t++) e[t] = x[t]!;
  const learnable = periods.filter((p) => baseline.to - baseline.from >= CYCLES_MIN * p);
  const passes = learnable.length > 1 ? PASSES : 1;
  for (let pass = 0; pass < passes; pass++) {
    for (const period of learnable) {
      const shape = learnShape(e, period, baseline);
      for (let t = baseline.from; t < end; t++) e[t] = e[t]! - readShape(shape, period, t);
    }
  }
  return e;
}

function learnShape(e: Float64Array, period: number, baseline: BaselineStretch): Float64Array {
  const bins = Math.ceil(period - 1e-9);
  const sum = new Float64Array(bins);
  const count = new Float64Array(bins);
  for (let t = baseline.from; t < baseline.to; t++) {
    const bin = Math.round(phaseOf(t, period) * bins) % bins;
    sum[bin] = sum[bin]! + e[t]!;
    count[bin] = count[bin]! + 1;
  }
  for (let i = 0; i < bins; i++) sum[i] = count[i]! > 0 ? sum[i]! / count[i]! : 0;
  const mean = sum.reduce((a, b) => a + b, 0) / bins;
  return sum.map((v) => v - mean);
}

function readShape(shape: Float64Array, period: number, t: number): number {
  const bins = shape.length;
  const at = phaseOf(t, period) * bins;
  const left = Math.floor(at);
  const fraction = at - left;
  return shape[left % bins]! * (1 - fraction) + shape[(left + 1) % bins]! * fraction;
}

/** Phase in [0, 1). */
function phaseOf(t: number, period: number): number {
  const cycles = t / period;
  return cycles - Math.floor(cycles);
}
