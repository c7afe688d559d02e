import FFT from "fft.js";
import { median } from "simple-statistics";
import { requireFinite } from "./finite-series.ts";

/** Longest stretch that is transformed at once; longer ones are looked at by their end, then by means of neighbours. */
const TRANSFORM_MAX = 131_072;
const CYCLES_MIN = 5;
const SAMPLES_MIN = 4;
const POWER_SHARE_MIN = 0.25;
const LINE_OVER_MEDIAN_MIN = 15;
const COHERENCE_MIN = 0.8;

/**
 * The period of a line that dominates the spectrum of a series; null if there is none.
 *
 *   straight line removed, Hann window, Fourier transform, highest bin, refined by a parabola through the logarithms of
 *   three bins; a line of 2, 3 or 4 times the period wins if it holds more than 1 % of the peak and stands out
 *
 * Limits: accurate to about 1/100 of a bin for a clean line; needs 5 cycles, 4 samples a period, a quarter of the power,
 * 15 times the local median, and one phase throughout. A narrow band of noise can pass for a line in short series.
 *
 * @param x shape [n], finite, start-up removed
 * @returns period in samples, or null
 * @throws NON_FINITE, HISTORY_INVALID
 * @see Harris (1978), On the use of windows for harmonic analysis (from memory); thresholds common practice, no source
 */
export function findPeriod(x: Float64Array): number | null {
  if (x.length < 4 * CYCLES_MIN) return null;
  requireFinite(x, "the search for a period", 1);
  const recent = x.subarray(Math.max(0, x.length - TRANSFORM_MAX));
  const found = strongestLine(recent);
  if (found !== null || x.length <= TRANSFORM_MAX) return found;
  const factor = Math.ceil(x.length / TRANSFORM_MAX);
  const slow = strongestLine(neighbourMeans(x, factor));
  return slow === null ? null : slow * factor;
}

function neighbourMeans(x: Float64Array, factor: number): Float64Array {
  const out = new Float64Array(Math.floor(x.length / factor));
  for (let j = 0; j < out.length; j++) {
    for (let i = 0; i < factor; i++) out[j]! += x[j * factor + i]! / factor;
  }
  return out;
}

function strongestLine(x: Float64Array): number | null {
  const { power, size } = spectrum(x);
  const scale = size / x.length;
  const from = Math.ceil(CYCLES_MIN * scale);
  const to = Math.min(power.length - 2, Math.floor(size / SAMPLES_MIN));
  let peak = from;
  for (let k = from; k <= to; k++) if (power[k]! > power[peak]!) peak = k;
  // At the edge of the search the highest bin may be the flank of something slower.
  const summit = power[peak]! >= power[peak - 1]! && power[peak]! >= power[peak + 1]!;
  if (to <= from || !(power[peak]! > 0) || !summit) return null;
  let total = 0;
  for (let k = 1; k < power.length; k++) total += power[k]!;
  const reach = Math.ceil(2 * scale);
  if (lineSum(power, peak, reach) < POWER_SHARE_MIN * total) return null;
  if (power[peak]! < LINE_OVER_MEDIAN_MIN * localMedian(power, peak, reach)) return null;
  const period = size / refine(power, peak);
  if (coherence(x, period) < COHERENCE_MIN) return null;
  return period * multiple(power, peak, reach, x.length / period);
}

/** A subharmonic makes the true period longer: blades that differ, or a truncation every other step. */
function multiple(power: Float64Array, peak: number, reach: number, cycles: number): number {
  for (const times of [4, 3, 2]) {
    const at = Math.round(peak / times);
    if (cycles / times < CYCLES_MIN || at < 2 * reach) continue;
    let best = 0;
    for (let k = at - 1; k <= at + 1; k++) best = Math.max(best, power[k]!);
    if (best > 0.01 * power[peak]! && best > 30 * localMedian(power, at, reach)) return times;
  }
  return 1;
}

function spectrum(x: Float64Array): { power: Float64Array; size: number } {
  const n = x.length;
  const size = 2 ** Math.ceil(Math.log2(Math.max(8, n)));
  const fft = new FFT(size);
  const input = new Array<number>(size).fill(0);
  const { level, slope } = straightLine(x);
  for (let i = 0; i < n; i++) {
    const window = 0.5 - 0.5 * Math.cos((2 * Math.PI * (i + 0.5)) / n);
    input[i] = (x[i]! - level - slope * (i - (n - 1) / 2)) * window;
  }
  const output = fft.createComplexArray() as number[];
  fft.realTransform(output, input);
  const power = new Float64Array(size / 2);
  for (let k = 0; k < power.length; k++) power[k] = output[2 * k]! ** 2 + output[2 * k + 1]! ** 2;
  return { power, size };
}

function straightLine(x: Float64Array): { level: number; slope: number } {
  const n = x.length;
  const middle = (n - 1) / 2;
  let level = 0;
  for (const value of x) level += value / n;
  let moment = 0;
  for (let i = 0; i < n; i++) moment += (i - middle) * (x[i]! - level);
  return { level, slope: moment / ((n * (n * n - 1)) / 12) };
}

function lineSum(power: Float64Array, peak: number, reach: number): number {
  let sum = 0;
  for (let k = Math.max(1, peak - reach); k <= Math.min(power.length - 1, peak + reach); k++)
    sum += power[k]!;
  return sum;
}

function localMedian(power: Float64Array, peak: number, reach: number): number {
  const around: number[] = [];
  for (let k = Math.max(1, peak - 12 * reach); k <= Math.min(power.length - 1, peak + 12 * reach); k++)
    if (Math.abs(k - peak) > 2 * reach) around.push(power[k]!);
  return around.length === 0 ? 0 : median(around);
}

function refine(power: Float64Array, peak: number): number {
  const [a, b, c] = [power[peak - 1]!, power[peak]!, power[peak + 1]!].map((p) => Math.log(p + 1e-300));
  const bend = a! - 2 * b! + c!;
  return bend < 0 ? peak + (0.5 * (a! - c!)) / bend : peak;
}

/** Length of the mean of the unit phase vectors of four quarters: 1 for a clock, about 0.5 for a narrow band of noise. */
function coherence(x: Float64Array, period: number): number {
  const quarter = Math.floor(x.length / 4);
  let re = 0;
  let im = 0;
  for (let q = 0; q < 4; q++) {
    const part = x.subarray(q * quarter, (q + 1) * quarter);
    const { level, slope } = straightLine(part);
    let c = 0;
    let s = 0;
    for (let i = 0; i < quarter; i++) {
      const angle = (2 * Math.PI * (q * quarter + i)) / period;
      const window = 0.5 - 0.5 * Math.cos((2 * Math.PI * (i + 0.5)) / quarter);
      const value = (part[i]! - level - slope * (i - (quarter - 1) / 2)) * window;
      c += value * Math.cos(angle);
      s += value * Math.sin(angle);
    }
    const length = Math.hypot(c, s);
    if (length > 0) {
      re += c / length / 4;
      im += s / length / 4;
    }
  }
  return Math.hypot(re, im);
}
