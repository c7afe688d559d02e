/** Blocks that make up the recent past. */
const RECENT_BLOCKS = 10;
/** E-folds by which the recent past must lie below the whole one to count as settled. */
const DROP_MIN = 1.5;
/** Least rise over the recent past that counts: more than over the whole past, because ten blocks may be a lull. */
const ALLOWANCE_MIN = 1.2;

/**
 * The last blocks of a reference, for a run whose start-up still dominates the whole one.
 *
 * A wake that settles slowly leaves log scales that fall over many e-folds; their median and spread say little about
 * the run as it is now. Where the last ten blocks lie clearly and steadily below the whole, they are the reference.
 */
export class QuietReference {
  private readonly recent = new Float64Array(RECENT_BLOCKS);
  private readonly sorted = new Float64Array(RECENT_BLOCKS);
  private count = 0;

  /** Adds one log scale; the oldest of more than ten is forgotten. */
  add(logScale: number): void {
    this.recent[this.count % RECENT_BLOCKS] = logScale;
    this.count++;
  }

  /**
   * Rise over the whole reference's median at which a block is louder than the settled past allows (it may be negative);
   * infinite where the past has not grown quieter.
   */
  allowanceOver(wholeMedian: number, sensitivity: number): number {
    if (this.count < RECENT_BLOCKS) return Number.POSITIVE_INFINITY;
    this.sorted.set(this.recent);
    this.sorted.sort();
    const middle = (this.sorted[4]! + this.sorted[5]!) / 2;
    // Between the second and the ninth of ten lies 80 % of what they show: 2.56 standard deviations if normal.
    const spread = (this.sorted[8]! - this.sorted[1]!) / 2.56;
    const drop = wholeMedian - middle;
    if (drop < Math.max(DROP_MIN, 2 * spread)) return Number.POSITIVE_INFINITY;
    return sensitivity * Math.max(ALLOWANCE_MIN, 2 * spread) - drop;
  }
}
