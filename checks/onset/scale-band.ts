import { ExpandingReference } from "./expanding-reference.ts";
import type { ArmingCounts } from "./monitor-layout.ts";
import { QuietReference } from "./quiet-reference.ts";

/** Least spread of the log scale that is believed, in e-folds: a few quiet blocks prove no less. */
const SPREAD_MIN = 0.1;
/** Spread above which a short reference is still taken at its word; a long one must not go deaf. */
const ALLOWANCE_MAX = 1;
const LONG_REFERENCE_BLOCKS = 40;

/** A spread from n blocks is itself uncertain, and reads low in a lull: it is raised by 5/n of itself. */
const SHORT_REFERENCE = 5;

/** Settings of one band. */
export interface ScaleBandSettings {
  /** Least rise of the log scale over its reference that counts, e-folds. */
  readonly allowanceMin: number;
  /** Sum of the excesses at which the band speaks up, e-folds; no block adds more than 1. */
  readonly threshold: number;
  /** Multiplies what has to be seen. */
  readonly sensitivity: number;
  readonly arming: ArmingCounts;
}

/**
 * Watches the log scale of a quantity, block by block, for a lasting rise over its own past.
 *
 *   C = max(0, C + clip(y − m − k, −1, 1)),  alarm at C > threshold
 *   m = median, s = max(0.10, 1.4826·MAD·(1 + 5/n)) of a reference of n blocks that lags a few behind
 *   k = max(k_min, 2s), at most 1 once the reference has 40 blocks
 *
 * The lag keeps a growth out of its own reference; the clip makes an alarm take several blocks whatever one of them
 * shows. A run that has become quiet after a long start-up is held against its last blocks instead of all, see
 * {@link QuietReference}.
 *
 * Limits: growth slower than the reference can be told from (less than about 0.01 e-folds a block) goes unseen, and so
 * does a rise by less than the allowance.
 *
 * @see Page (1954), Continuous inspection schemes (the cumulative sum)
 */
export class ScaleBand {
  /** Cumulative sum; 0 while nothing is suspected. */
  sum = 0;
  /** Blocks since the sum was last 0. */
  rising = 0;
  private readonly settings: ScaleBandSettings;
  private readonly reference = new ExpandingReference();
  private readonly quiet = new QuietReference();
  private readonly waiting: number[] = [];

  constructor(settings: ScaleBandSettings) {
    this.settings = settings;
  }

  /** Whether the reference is long enough to compare with. */
  get armed(): boolean {
    return this.reference.count >= this.settings.arming.blocks;
  }

  /** Median log scale of the reference; NaN for an empty one. */
  get usual(): number {
    return this.reference.median();
  }

  /** Takes the log scale of the next block; true if the band speaks up at it. */
  feed(logScale: number): boolean {
    if (this.armed) {
      const excess = logScale - this.limit();
      this.sum = Math.max(0, this.sum + Math.max(-1, Math.min(1, excess)));
      this.rising = this.sum > 0 ? this.rising + 1 : 0;
    }
    this.waiting.push(logScale);
    if (this.waiting.length > this.settings.arming.late) {
      const settled = this.waiting.shift()!;
      this.reference.add(settled);
      this.quiet.add(settled);
    }
    return this.sum > this.settings.threshold;
  }

  private limit(): number {
    const { allowanceMin, sensitivity } = this.settings;
    const middle = this.reference.median();
    const { count } = this.reference;
    const spread = Math.max(SPREAD_MIN, this.reference.spread() * (1 + SHORT_REFERENCE / count));
    const longEnough = count >= LONG_REFERENCE_BLOCKS;
    const wide = longEnough ? Math.min(ALLOWANCE_MAX, 2 * spread) : 2 * spread;
    const allowance = Math.max(allowanceMin, wide * sensitivity);
    return middle + Math.min(allowance, this.quiet.allowanceOver(middle, sensitivity));
  }
}
