import { CumulativeSum } from "./cumulative-sum.ts";
import { ExpandingReference } from "./expanding-reference.ts";
import type { ArmingCounts } from "./monitor-layout.ts";
import { QuietReference } from "./quiet-reference.ts";

/** Least spread of the log scale that is believed, in e-folds: a few quiet blocks prove no less. */
const SPREAD_MIN = 0.1;
/** Spread above which a short reference is still taken at its word; a long one must not go deaf. */
const ALLOWANCE_MAX = 1;
const LONG_REFERENCE_BLOCKS = 40;

/** A spread from n blocks is itself uncertain, and reads low in a lull: it is raised by 6/n of itself. */
const SHORT_REFERENCE = 6;

/** The patient sum's share of the allowance, and its threshold over the prompt one's. */
const PATIENT_ALLOWANCE = 0.8;
const PATIENT_THRESHOLD = 1.5;

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
 *   C' likewise with 0.8·k, alarm at C' > 1.5·threshold, once the reference has 40 blocks
 *   m = median, s = max(0.10, 1.4826·MAD·(1 + 6/n)) of a reference of n blocks that lags a few behind
 *   k = max(k_min, 2s), at most 1 once the reference has 40 blocks
 *
 * The lag keeps a growth out of its own reference; the clip makes an alarm take several blocks whatever one of them
 * shows. The second sum trades patience for reach: it finds a lasting rise that is hardly above the allowance. A run that has become quiet after a long start-up is held against its last blocks instead of all, see
 * {@link QuietReference}.
 *
 * Limits: growth slower than the reference can be told from (less than about 0.01 e-folds a block) goes unseen, and so
 * does a rise by less than the allowance.
 *
 * @see Page (1954), Continuous inspection schemes, Biometrika 41
 */
export class ScaleBand {
  private readonly prompt = new CumulativeSum();
  private readonly patient = new CumulativeSum();
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

  /** Blocks since the suspicion arose; 0 while there is none. */
  get rising(): number {
    return Math.max(this.prompt.length, this.patient.length);
  }

  /** Takes the log scale of the next block; true if the band speaks up at it. */
  feed(logScale: number): boolean {
    if (this.armed) {
      const middle = this.reference.median();
      const allowance = this.allowance(middle);
      this.prompt.add(logScale - middle - allowance);
      if (this.longReference) this.patient.add(logScale - middle - PATIENT_ALLOWANCE * allowance);
    }
    this.waiting.push(logScale);
    if (this.waiting.length > this.settings.arming.late) {
      const settled = this.waiting.shift()!;
      this.reference.add(settled);
      this.quiet.add(settled);
    }
    const { threshold } = this.settings;
    return this.prompt.value > threshold || this.patient.value > PATIENT_THRESHOLD * threshold;
  }

  private get longReference(): boolean {
    return this.reference.count >= LONG_REFERENCE_BLOCKS;
  }

  /** Rise over the reference's median that is allowed; negative for a run that has become quieter than its past. */
  private allowance(middle: number): number {
    const { allowanceMin, sensitivity } = this.settings;
    const uncertain = 1 + SHORT_REFERENCE / this.reference.count;
    const wide = 2 * Math.max(SPREAD_MIN, this.reference.spread() * uncertain);
    const capped = this.longReference ? Math.min(ALLOWANCE_MAX, wide) : wide;
    const allowance = Math.max(allowanceMin, capped * sensitivity);
    return Math.min(allowance, this.quiet.allowanceOver(middle, sensitivity));
  }
}
