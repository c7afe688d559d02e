import { ExpandingReference } from "./expanding-reference.ts";

/** Differences that must grow in a row, and differences needed before anything is said. */
const RUN = 5;
const DIFFERENCES_MIN = 9;
/** Least ratio of each difference to the one before. */
const RATIO_MIN = 1.7;
/** Share of the last ratio that the newest must keep: a blow-up does not slow down. */
const RATIO_KEPT = 0.75;
/** Coarser and coarser blocks, each twice as long: a million samples fill 15 levels. */
const LEVELS_MAX = 20;

/**
 * Finds a monotone blow-up: block levels whose differences grow geometrically.
 *
 *   D = first differences of block levels; the last 5 of one sign, 4 successive ratios >= 1.7, the newest at least
 *   0.75 of the one before; |D0| > 5·noise, |D2| > 2·noise, |D0| > 3·max of the past
 *
 * Blocks double in length from level to level, so that one of them shows a growth of 1.7 to 2.9 a block whatever the
 * rate is. The noise is the median size of past differences at that level, divided by 0.6745.
 *
 * Limits: needs nine differences at the level that fits, so a growth by less than 5 e-folds in the whole run is not
 * called; the call comes 4 to 9 e-folds after the growth has left the noise.
 */
export class MonotoneGrowth {
  private readonly levels: DyadicLevel[] = [];
  private readonly sensitivity: number;

  constructor(sensitivity: number) {
    this.sensitivity = sensitivity;
  }

  /** Takes the median of the next block, and the size below which nothing matters; true if a blow-up is called at it. */
  feed(blockLevel: number, sizeMin: number): boolean {
    let called = false;
    let value: number | null = blockLevel;
    for (let i = 0; value !== null && i < LEVELS_MAX; i++) {
      this.levels[i] ??= new DyadicLevel();
      const level = this.levels[i]!;
      level.add(value);
      if (level.blowsUp(this.sensitivity, sizeMin)) called = true;
      value = level.pairMean();
    }
    return called;
  }
}

class DyadicLevel {
  private previous = Number.NaN;
  private half: number | null = null;
  private pair: number | null = null;
  /** Newest differences, newest first. */
  private readonly recent = new Float64Array(RUN);
  private count = 0;
  private readonly pastSizes = new ExpandingReference(128);
  private pastMax = 0;

  add(value: number): void {
    if (!Number.isNaN(this.previous)) this.addDifference(value - this.previous);
    this.previous = value;
    if (this.half === null) {
      this.half = value;
      this.pair = null;
    } else {
      this.pair = this.half + (value - this.half) / 2;
      this.half = null;
    }
  }

  /** Mean of the last two values once both are there: the value of the next level. */
  pairMean(): number | null {
    return this.pair;
  }

  blowsUp(sensitivity: number, sizeMin: number): boolean {
    if (this.count < DIFFERENCES_MIN || !(Math.abs(this.recent[0]!) > sizeMin)) return false;
    const d = this.recent;
    for (let i = 0; i + 1 < RUN; i++) {
      if (!(d[i]! * Math.sign(d[i + 1]!) >= RATIO_MIN * Math.abs(d[i + 1]!)) || d[i + 1] === 0) return false;
    }
    if (d[0]! / d[1]! < RATIO_KEPT * (d[1]! / d[2]!)) return false;
    const noise = this.pastSizes.median() / 0.6745;
    const [newest, third] = [Math.abs(d[0]!), Math.abs(d[2]!)];
    return (
      newest > 5 * sensitivity * noise &&
      third > 2 * sensitivity * noise &&
      newest > 3 * sensitivity * this.pastMax
    );
  }

  private addDifference(difference: number): void {
    if (this.count >= RUN) {
      const leaving = Math.abs(this.recent[RUN - 1]!);
      this.pastSizes.add(leaving);
      this.pastMax = Math.max(this.pastMax, leaving);
    }
    this.recent.copyWithin(1, 0, RUN - 1);
    this.recent[0] = difference;
    this.count++;
  }
}
