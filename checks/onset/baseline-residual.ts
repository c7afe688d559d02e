import { blockLogRms } from "./block-log-rms.ts";
import { median } from "./median-in-place.ts";
import type { MonitorLayout } from "./monitor-layout.ts";
import { type BaselineStretch, removePeriods } from "./period-template.ts";

/** Longest stretch before an alarm that is looked at, blocks. */
const BLOCKS_BACK = 300;
/** E-folds by which the start may be louder than the rest of the baseline before it is left out. */
const START_EXCESS = 0.7;

/** A channel without its periods and its usual level, on the stretch that matters to an alarm. */
export interface BaselineResidual {
  /** shape [n], NaN outside from..to. */
  readonly e: Float64Array;
  readonly from: number;
  /** First sample that is no longer looked at. */
  readonly to: number;
  readonly baseline: BaselineStretch;
  /** Size below which nothing counts. */
  readonly floor: number;
  /** Lag-1 correlation of e over the baseline, 0..0.99. */
  readonly correlation: number;
}

/** First sample that is looked at for an alarm. */
export function searchStart(layout: MonitorLayout, alarmIndex: number): number {
  const back = Math.floor((alarmIndex + 1 - layout.skip) / layout.block) - BLOCKS_BACK;
  return layout.skip + Math.max(0, back) * layout.block;
}

/**
 * Takes periods and level out of a channel, both learnt from a baseline before the trouble.
 *
 * @param x shape [n]; finite up to `to`
 * @param stretch.baselineEnd first sample that is not sure to be sound
 * @param dust share of the level below which noise is numerical
 */
export function baselineResidual(
  x: Float64Array,
  layout: MonitorLayout,
  stretch: { from: number; baselineEnd: number; to: number },
  dust: number,
): BaselineResidual {
  const { to } = stretch;
  const baselineEnd = Math.min(to, Math.max(stretch.baselineEnd, stretch.from + 2 * layout.block));
  const attempt = (from: number): BaselineResidual => {
    const baseline = { from, to: baselineEnd };
    const e = removePeriods(x, layout.periods, baseline, to);
    const level = median(e.subarray(from, baselineEnd));
    for (let t = from; t < to; t++) e[t] = e[t]! - level;
    const floor = dust * median(x.subarray(from, baselineEnd).map(Math.abs));
    return { e, from, to, baseline, floor, correlation: lagOne(e.subarray(from, baselineEnd)) };
  };
  const first = attempt(stretch.from);
  const settled = settledStart(first, layout.block);
  return settled > stretch.from ? attempt(settled) : first;
}

/** Leaves out a start-up that is still clearly louder than the second half of the baseline. */
function settledStart(residual: BaselineResidual, block: number): number {
  const { e, baseline, floor } = residual;
  const y = blockLogRms(e, { from: baseline.from, to: baseline.to, block, floor });
  if (y.length < 8) return baseline.from;
  const usual = median(y.slice(y.length >> 1));
  let j = 0;
  while (j < y.length >> 1 && y[j]! > usual + START_EXCESS) j++;
  return baseline.from + j * block;
}

function lagOne(e: Float64Array): number {
  let [cross, square] = [0, 0];
  for (let t = 1; t < e.length; t++) {
    cross += e[t]! * e[t - 1]!;
    square += e[t]! * e[t]!;
  }
  return square > 0 ? Math.max(0, Math.min(0.99, cross / square)) : 0;
}
