import { type LagPolynomial, lagPolynomial } from "./lag-polynomial.ts";
import { medianInPlace } from "./median-in-place.ts";
import type { MonitorLayout } from "./monitor-layout.ts";
import { robustScale } from "./robust-scale.ts";
import { SPIKE_REACH, spikeFlags } from "./spike-flags.ts";

/** What one block of samples shows. */
export interface BlockReading {
  /** Median. */
  middle: number;
  /** Median of the absolute values. */
  size: number;
  /** Robust scale of the seasonal differences. */
  differencedScale: number;
  /** Robust scale about the block's median and slope. */
  plainScale: number;
}

const NO_FLAGS: readonly number[] = [];

/**
 * Keeps the last samples in a ring and reads a block whenever one is full, from the end of the skipped start on.
 *
 * Memory: four times the sum of the periods, rounded up to a power of two, and a few blocks.
 */
export class BlockReader {
  readonly reading: BlockReading = { middle: 0, size: 0, differencedScale: 0, plainScale: 0 };
  private readonly layout: MonitorLayout;
  private readonly ring: Float64Array;
  private readonly mask: number;
  private readonly once: LagPolynomial;
  private readonly twice: LagPolynomial;
  /** Differences of the newest block and a few samples before it; `newest` is the block alone. */
  private readonly r: Float64Array;
  private readonly newest: Float64Array;
  private readonly r2: Float64Array;
  private readonly work: Float64Array;
  private readonly scratch: Float64Array;
  private readonly found: Int32Array;
  private count = 0;
  private nextBlockEnd: number;

  constructor(layout: MonitorLayout) {
    this.layout = layout;
    this.nextBlockEnd = layout.skip + layout.block;
    this.once = lagPolynomial(layout.periods, 1);
    this.twice = lagPolynomial(layout.periods, 2);
    const span = layout.block + 2 * SPIKE_REACH;
    const size = 2 ** Math.ceil(Math.log2(this.twice.reach + span + 1));
    this.ring = new Float64Array(size);
    this.mask = size - 1;
    this.r = new Float64Array(span);
    this.newest = this.r.subarray(2 * SPIKE_REACH);
    this.r2 = new Float64Array(span);
    this.work = new Float64Array(layout.block);
    this.scratch = new Float64Array(layout.block);
    this.found = new Int32Array(span);
  }

  /** Takes the next sample; true if it completes a block, whose reading then stands in `reading`. */
  feed(x: number): boolean {
    this.ring[this.count++ & this.mask] = x;
    if (this.count < this.nextBlockEnd) return false;
    this.nextBlockEnd += this.layout.block;
    this.read();
    return true;
  }

  /**
   * Samples that stand out as spikes, as indices of the run, given the limit; the newest few of a block are left to the
   * next one, because a spike is told by both of its sides.
   */
  flags(limit: number, newestIndex: number): readonly number[] {
    const { r, r2 } = this;
    const span = r.length;
    let [low, high] = [r[0]!, r[0]!];
    for (let i = 1; i < span; i++) {
      if (r[i]! < low) low = r[i]!;
      else if (r[i]! > high) high = r[i]!;
    }
    // Nothing can stand out from anything by more than the whole range; this is the common case.
    if (high - low <= limit) return NO_FLAGS;
    this.filter(this.twice, r2);
    const n = spikeFlags(r, r2, span, limit, this.found);
    return Array.from(this.found.subarray(0, n), (i) => newestIndex + 1 - span + i);
  }

  private read(): void {
    const { block } = this.layout;
    const { work, scratch, reading } = this;
    for (let i = 0; i < block; i++) {
      work[i] = this.ring[(this.count - block + i) & this.mask]!;
      scratch[i] = Math.abs(work[i]!);
    }
    reading.size = medianInPlace(scratch, block);
    scratch.set(work);
    reading.middle = medianInPlace(scratch, block);
    this.removeLine(work, reading.middle);
    reading.plainScale = robustScale(work, block, scratch);
    this.filter(this.once, this.r);
    work.set(this.newest);
    this.removeLine(work, 0);
    reading.differencedScale = robustScale(work, block, scratch);
  }

  /** Takes the block's median, and the slope between the medians of its halves, out of the samples in `work`. */
  private removeLine(work: Float64Array, middle: number): void {
    const { scratch } = this;
    const n = work.length;
    const half = n >> 1;
    for (let i = 0; i < half; i++) scratch[i] = work[i]!;
    const early = medianInPlace(scratch, half);
    for (let i = 0; i < half; i++) scratch[i] = work[n - half + i]!;
    const slope = (medianInPlace(scratch, half) - early) / (n - half);
    for (let i = 0; i < n; i++) work[i] = work[i]! - middle - slope * (i - (n - 1) / 2);
  }

  /** Filters the newest samples into `out`. */
  private filter(by: LagPolynomial, out: Float64Array): void {
    const { ring, mask } = this;
    const n = out.length;
    const from = this.count - n;
    out.fill(0);
    for (let k = 0; k < by.lags.length; k++) {
      const weight = by.weights[k]!;
      const shifted = from - by.lags[k]!;
      for (let i = 0; i < n; i++) out[i] = out[i]! + weight * ring[(shifted + i) & mask]!;
    }
  }
}
