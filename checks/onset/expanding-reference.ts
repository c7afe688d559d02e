/**
 * A growing set of values with their median and spread, in bounded memory.
 *
 * Up to `capacity` values are kept exactly. Then every second one in the order of time is dropped, and from there on
 * only every second new one is taken, and so on: an evenly thinned record of the whole past. Every statistic is a pure
 * function of the values added so far.
 */
export class ExpandingReference {
  /** Values offered so far, kept or not. */
  count = 0;
  private size = 0;
  private stride = 1;
  /** Spread of the values kept; NaN until it is asked for again after a change. */
  private knownSpread = Number.NaN;
  private readonly inTime: Float64Array;
  private readonly sorted: Float64Array;

  constructor(capacity = 512) {
    this.inTime = new Float64Array(capacity);
    this.sorted = new Float64Array(capacity);
  }

  /** Adds one finite value. */
  add(value: number): void {
    this.count++;
    if ((this.count - 1) % this.stride !== 0) return;
    if (this.size === this.inTime.length) this.thin();
    if ((this.count - 1) % this.stride !== 0) return;
    this.inTime[this.size] = value;
    let at = this.size++;
    while (at > 0 && this.sorted[at - 1]! > value) {
      this.sorted[at] = this.sorted[at - 1]!;
      at--;
    }
    this.sorted[at] = value;
    this.knownSpread = Number.NaN;
  }

  /** Median of the values kept; NaN for none. */
  median(): number {
    const middle = this.size >> 1;
    if (this.size % 2 === 1) return this.sorted[middle]!;
    return (this.sorted[middle - 1]! + this.sorted[middle]!) / 2;
  }

  /** Median absolute deviation about the median, times 1.4826; NaN for no value. */
  spread(): number {
    if (Number.isNaN(this.knownSpread)) this.knownSpread = this.findSpread();
    return this.knownSpread;
  }

  private findSpread(): number {
    const centre = this.median();
    // The deviations left and right of the median are two sorted lists: merge them up to the middle.
    let right = this.size >> 1;
    let left = right - 1;
    let last = Number.NaN;
    let before = Number.NaN;
    for (let taken = 0; taken <= this.size >> 1; taken++) {
      const low = left >= 0 ? centre - this.sorted[left]! : Number.POSITIVE_INFINITY;
      const high = right < this.size ? this.sorted[right]! - centre : Number.POSITIVE_INFINITY;
      before = last;
      if (low < high) left--;
      else right++;
      last = Math.min(low, high);
    }
    return 1.4826 * (this.size % 2 === 1 ? last : (last + before) / 2);
  }

  private thin(): void {
    const half = this.size >> 1;
    for (let i = 0; i < half; i++) this.inTime[i] = this.inTime[2 * i]!;
    this.size = half;
    this.stride *= 2;
    this.sorted.set(this.inTime.subarray(0, half));
    this.sorted.subarray(0, half).sort();
  }
}
