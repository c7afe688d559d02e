import { ExpandingReference } from "./expanding-reference.ts";

const BEFORE = 8;
const GAP = 1;
const AFTER = 4;
const WINDOW = BEFORE + GAP + AFTER;
/** Blocks past the start before a shift is called. */
const BLOCKS_MIN = 25;
/** Blocks that the record of past differences lags behind, and differences it needs. */
const LATE = 6;
const PAST_MIN = 8;
/** Least size of a shift in standard errors of its own window, and in standard deviations of past differences. */
const LOCAL_MIN = 5;
const PAST_RATIO_MIN = 8;
/** A shift jumps at once and stays: largest drift of the plateau, least jump across the gap. */
const DRIFT_MAX = 0.35;
const JUMP_MIN = 0.7;

/** A step of the mean between two stretches of blocks. */
export interface MeanShiftFound {
  /** Size of the step, unit of the signal. */
  readonly step: number;
  /** Blocks from the newest back to the gap in which the step lies. */
  readonly blocksBack: number;
}

/**
 * Finds a step of the mean: least squares over 8 blocks, a gap of 1, and 4 blocks, with a common slope.
 *
 *   M_j = a + b·j + D·[j after the gap],  T = |D|/(se(D)·(1 + 4/9)) > 5,  |D| > 8·(median of past |D|)/0.6745
 *
 * The second condition holds D against what slow noise made of it so far: the standard error of one window knows
 * nothing of correlation between blocks. The drift over the plateau and the jump across the gap tell a step from
 * a ramp.
 *
 * Limits: a step within noise of long memory needs to be eight times what that noise does on its own in a window; one
 * in the first 25 blocks past the start goes unnoticed.
 */
export class MeanShift {
  private readonly window = new Float64Array(WINDOW);
  private count = 0;
  private readonly past = new ExpandingReference(256);
  private readonly waiting: number[] = [];
  private readonly sensitivity: number;

  constructor(sensitivity: number) {
    this.sensitivity = sensitivity;
  }

  /** Takes the median of the next block, and the size below which nothing matters. */
  feed(blockLevel: number, sizeMin: number): MeanShiftFound | null {
    this.window.copyWithin(0, 1);
    this.window[WINDOW - 1] = blockLevel;
    this.count++;
    if (this.count < WINDOW) return null;
    const { step, standardError } = stepFit(this.window);
    const found = this.judge(step, standardError, sizeMin);
    this.waiting.push(Math.abs(step));
    if (this.waiting.length > LATE) this.past.add(this.waiting.shift()!);
    return found ? { step, blocksBack: AFTER + GAP } : null;
  }

  private judge(step: number, standardError: number, sizeMin: number): boolean {
    if (this.count < BLOCKS_MIN || this.past.count < PAST_MIN) return false;
    const size = Math.abs(step);
    if (!(size > sizeMin * this.sensitivity)) return false;
    if (!(size > LOCAL_MIN * this.sensitivity * standardError * (1 + 4 / 9))) return false;
    if (!(size > (PAST_RATIO_MIN * this.sensitivity * this.past.median()) / 0.6745)) return false;
    const w = this.window;
    const [first, second, third, fourth] = [w[9]!, w[10]!, w[11]!, w[12]!];
    const drift = Math.abs((third + fourth) / 2 - (first + second) / 2);
    const jump = (first - w[BEFORE - 1]!) * Math.sign(step);
    return drift < DRIFT_MAX * size && jump >= JUMP_MIN * size;
  }
}

const POSITIONS = Float64Array.from({ length: BEFORE + AFTER }, (_, i) => (i < BEFORE ? i : i + GAP));

/** Step between the two stretches beside a common slope, with its standard error by least squares. */
function stepFit(window: Float64Array): { step: number; standardError: number } {
  const n = POSITIONS.length;
  const value = (i: number) => window[POSITIONS[i]!]!;
  const [meanT, meanS] = [POSITIONS.reduce((a, b) => a + b, 0) / n, AFTER / n];
  let meanY = 0;
  for (let i = 0; i < n; i++) meanY += value(i) / n;
  let [tt, ts, ss, ty, sy] = [0, 0, 0, 0, 0];
  for (let i = 0; i < n; i++) {
    const t = POSITIONS[i]! - meanT;
    const s = (i < BEFORE ? 0 : 1) - meanS;
    const y = value(i) - meanY;
    tt += t * t;
    ts += t * s;
    ss += s * s;
    ty += t * y;
    sy += s * y;
  }
  const left = ss - (ts * ts) / tt;
  const step = (sy - (ts * ty) / tt) / left;
  const slope = (ty - step * ts) / tt;
  let rss = 0;
  for (let i = 0; i < n; i++) {
    const s = (i < BEFORE ? 0 : 1) - meanS;
    const e = value(i) - meanY - slope * (POSITIONS[i]! - meanT) - step * s;
    rss += e * e;
  }
  return { step, standardError: Math.sqrt(rss / (n - 3) / left) };
}
