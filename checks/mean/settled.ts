import { mean } from "../estimators/index.ts";

const BLOCKS_MIN = 8;
/** Largest share of one third's movement that the next third may repeat for the extrapolation to be used as it is. */
const RATIO_MAX = 0.9;

/** What a series that has come to rest says: bounds, no statistics. */
export interface Settled {
  /** First block of the stretch at rest. */
  readonly from: number;
  readonly mean: number;
  /** Bound on what the stretch itself leaves open, and on how far it would still move if it went on as it does. */
  readonly halfWidth: number;
  /** Whether the stretch is at least twice as long as what precedes it, and 8 blocks long. */
  readonly longEnough: boolean;
}

/**
 * The stretch over which a noise-free or nearly noise-free series has come to rest.
 *
 *   all blocks from d on within ε of the mean of the second half;
 *   half-width = max(max|y − ȳ|, range/(4n), |y_∞ − ȳ|), y_∞ from the movement over thirds as if it went on geometrically
 *
 * Limits: a relaxation that moves by less than 2ε over the stretch is taken for rest; y_∞ covers it if it decays like one
 * exponential with a time constant up to about three times the stretch.
 *
 * @param blocks shape [m], oldest first
 * @param epsilon ε, unit of the blocks
 * @param range largest less smallest sample of the record, which bounds what the ends of the stretch can add
 * @param samplesPerBlock samples in a block
 * @returns null if the second half itself does not stay within ε
 */
export function settled(
  blocks: Float64Array,
  epsilon: number,
  range: number,
  samplesPerBlock: number,
): Settled | null {
  const m = blocks.length;
  const half = Math.floor(m / 2);
  const level = mean(blocks.subarray(half));
  let from = m;
  while (from > 0 && Math.abs(blocks[from - 1]! - level) <= epsilon) from--;
  if (from > half) return null;
  const rest = blocks.subarray(from);
  const value = mean(rest);
  let away = 0;
  for (const block of rest) away = Math.max(away, Math.abs(block - value));
  const ends = range / (4 * rest.length * samplesPerBlock);
  return {
    from,
    mean: value,
    halfWidth: Math.max(away, ends, Math.abs(limitOf(rest) - value)),
    longEnough: rest.length >= 2 * from && rest.length >= BLOCKS_MIN,
  };
}

/** Where the means of three thirds would end if each step were the same share of the one before. */
function limitOf(y: Float64Array): number {
  const third = Math.floor(y.length / 3);
  if (third < 1) return mean(y);
  const [a, b, c] = [3, 2, 1].map((k) => mean(y.subarray(y.length - k * third, y.length - (k - 1) * third)));
  const before = b! - a!;
  const last = c! - b!;
  if (before * last <= 0) return mean(y);
  const ratio = Math.min(RATIO_MAX, last / before);
  return c! + (last * ratio) / (1 - ratio);
}
