import { median } from "./median-in-place.ts";

/** Samples in a row beyond a guard before it speaks up. */
const RUN = 5;
/** Samples at the start that give the scale for the first guard; also the stretch over which it asks for a doubling. */
const FIRST_SAMPLES = 20;
const FIRST_FACTOR = 1000;
/** Widths of the usual range that are allowed once it is known. */
const ARMED_FACTOR = 20;

/**
 * Watches for values that are out of all proportion, sample by sample.
 *
 *   armed: |x − mid| > 20·width
 *   before: |x| > 1000·median|x_0..x_19| and |x_t| > 2·|x_{t−20}|
 *   5 samples running
 *
 * The doubling tells a blow-up from a quantity that starts near zero and rises by a power of time.
 *
 * Limits: knows no scale for a channel whose first 20 samples are mostly zero, and then waits until it is armed.
 */
export class Guard {
  private run = 0;
  private seen = 0;
  private readonly latest = new Float64Array(FIRST_SAMPLES);
  private firstLimit = Number.POSITIVE_INFINITY;
  private middle = 0;
  private limit = Number.POSITIVE_INFINITY;
  private armed = false;
  private readonly sensitivity: number;

  constructor(sensitivity: number) {
    this.sensitivity = sensitivity;
  }

  /** Sets middle and usual width once the run has a reference, and again as it grows. */
  arm(middle: number, width: number): void {
    this.armed = true;
    this.middle = middle;
    this.limit = ARMED_FACTOR * this.sensitivity * width;
  }

  /** Takes the next finite sample; true if the guard speaks up at it. */
  feed(x: number): boolean {
    const beyond = this.armed ? Math.abs(x - this.middle) > this.limit : this.beyondFirst(Math.abs(x));
    this.run = beyond ? this.run + 1 : 0;
    return this.run >= RUN;
  }

  private beyondFirst(size: number): boolean {
    const at = this.seen % FIRST_SAMPLES;
    const before = this.latest[at]!;
    this.latest[at] = size;
    this.seen++;
    if (this.seen === FIRST_SAMPLES) {
      const usual = median(this.latest);
      if (usual > 0) this.firstLimit = FIRST_FACTOR * this.sensitivity * usual;
    }
    return this.seen > FIRST_SAMPLES && size > this.firstLimit && size > 2 * before;
  }
}
