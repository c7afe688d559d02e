import type { ArmingCounts } from "./monitor-layout.ts";

/** Flags this close belong to one spike. */
const ONE_SPIKE_STEPS = 3;
/** No block counts for more spikes than this. */
const COUNT_MAX = 6;
/** Sum at which a cluster is called, in spikes. */
const THRESHOLD = 8;
/** Rate that is assumed at least, spikes a block. */
const RATE_MIN = 0.05;

/**
 * Tells a cluster of spikes from single ones: a cumulative sum of their number a block.
 *
 *   C = max(0, C + min(count, 6) − k),  k = (λ1 − λ0)/ln(λ1/λ0),  alarm at C > 8
 *   λ0 = max(0.05, past rate a block),  λ1 = 5·λ0 + 0.75
 *
 * k is the slope of the likelihood ratio of two Poisson rates. The past rate lags behind like every reference here, so
 * that pulses which belong to the signal (an undeclared blade passing) are taken as usual.
 *
 * @see Page (1954); Lucas (1985), Counted data CUSUM's, Technometrics 27
 */
export class SpikeCluster {
  sum = 0;
  /** Spikes seen so far, and the sample of the first and of the newest. */
  spikes = 0;
  firstSpike: number | null = null;
  /** First spike since the sum was last 0: where the cluster begins. */
  clusterStart: number | null = null;
  private lastFlag = Number.NEGATIVE_INFINITY;
  private readonly threshold: number;
  private readonly arming: ArmingCounts;
  private readonly waiting: number[] = [];
  private pastSpikes = 0;
  private pastBlocks = 0;

  constructor(settings: { arming: ArmingCounts; sensitivity: number }) {
    this.arming = settings.arming;
    this.threshold = THRESHOLD * settings.sensitivity;
  }

  /** Takes the flagged samples of the next block, oldest first; true if a cluster is called at it. */
  feed(flags: readonly number[]): boolean {
    let count = 0;
    let firstHere: number | null = null;
    for (const sample of flags) {
      if (sample - this.lastFlag > ONE_SPIKE_STEPS) {
        count++;
        firstHere ??= sample;
      }
      this.lastFlag = sample;
    }
    this.spikes += count;
    this.firstSpike ??= firstHere;
    if (this.pastBlocks >= this.arming.blocks) this.accumulate(count, firstHere);
    this.learn(count);
    return this.sum > this.threshold;
  }

  private accumulate(count: number, firstHere: number | null): void {
    const usual = Math.max(RATE_MIN, this.pastSpikes / this.pastBlocks);
    const raised = 5 * usual + 0.75;
    const slope = (raised - usual) / Math.log(raised / usual);
    this.sum = Math.max(0, this.sum + Math.min(count, COUNT_MAX) - slope);
    if (this.sum === 0) this.clusterStart = null;
    else this.clusterStart ??= firstHere;
  }

  private learn(count: number): void {
    this.waiting.push(count);
    if (this.waiting.length <= this.arming.late) return;
    this.pastSpikes += this.waiting.shift()!;
    this.pastBlocks++;
  }
}
