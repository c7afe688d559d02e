import { type BaselineResidual, baselineResidual, searchStart } from "./baseline-residual.ts";
import { blockLogRms } from "./block-log-rms.ts";
import { DUST_SHARE } from "./dust.ts";
import type { MonitorLayout } from "./monitor-layout.ts";

/** Blocks in a row that lie an e-fold below the peak once a growth has turned round. */
const DECLINE_BLOCKS = 3;
/** Share of a history that is taken as sound to begin with. */
const FIRST_BASELINE = 0.6;
/** Samples a block, and e-folds over the baseline, that make the end of a history a growth. */
const LAST_BLOCK = 5;
const LAST_EFOLDS = 1.5;

/** Where the fluctuations are past their peak for good: a growth that has turned round says nothing more about its onset. */
export function beforeDecline(residual: BaselineResidual, block: number, alarmIndex: number): number {
  const { from, to } = residual;
  const y = blockLogRms(residual.e, { from, to, block, floor: residual.floor });
  const first = Math.max(0, Math.floor((alarmIndex - from) / block));
  let peak = first;
  for (let j = first; j < y.length; j++) {
    if (y[j]! > y[peak]!) peak = j;
    if (j - peak < DECLINE_BLOCKS) continue;
    const low = y[peak]! - 1;
    if (y.subarray(j + 1 - DECLINE_BLOCKS, j + 1).every((v) => v < low)) return from + (peak + 1) * block;
  }
  return to;
}

/** Whether a history that ends at `to` was growing there: its last two short blocks are loud. */
export function isGrowthBeforeEnd(x: Float64Array, layout: MonitorLayout, to: number): boolean {
  const from = searchStart(layout, to - 1);
  const length = to - from;
  if (length < 6 * layout.block) return false;
  const stretch = { from, baselineEnd: from + Math.round(FIRST_BASELINE * length), to };
  const { e, floor, baseline } = baselineResidual(x, layout, stretch, DUST_SHARE);
  const usual = blockLogRms(e, { from: baseline.from, to: baseline.to, block: layout.block, floor });
  const last = blockLogRms(e, { from: to - 2 * LAST_BLOCK, to, block: LAST_BLOCK, floor });
  const middle = usual.toSorted()[usual.length >> 1]!;
  return last.every((y) => y > middle + LAST_EFOLDS);
}
