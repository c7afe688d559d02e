import { type BaselineResidual, baselineResidual } from "./baseline-residual.ts";
import { DUST_SHARE } from "./dust.ts";
import type { Located } from "./located.ts";
import type { MonitorLayout } from "./monitor-layout.ts";
import { robustScale } from "./robust-scale.ts";
import { SPIKE_LIMIT } from "./spike-flags.ts";

/** Spikes that make a cluster when the rest is as quiet as before. */
const SPIKES_MIN = 4;
/** Rise of the robust scale up to which the rest is as quiet as before. */
const QUIET_RISE = 1.5;
/** Blocks before the suspected beginning in which the first spike is looked for. */
const BLOCKS_BACK = 2;

/**
 * Places the first spike of a cluster: the first sample beyond 8 robust scales of the baseline, from two blocks before
 * the place that the monitor suspects.
 *
 * @param x shape [n], finite up to `to`
 */
export function locateSpikes(
  x: Float64Array,
  layout: MonitorLayout,
  alarm: { suspect: number; to: number },
): Located {
  const { skip, block } = layout;
  const start = Math.max(skip, alarm.suspect - BLOCKS_BACK * block);
  const stretch = { from: skip, baselineEnd: start, to: alarm.to };
  const residual = baselineResidual(x, layout, stretch, DUST_SHARE);
  const first = firstSpike(residual, start, alarm.to) ?? alarm.suspect;
  return {
    kind: "spike-cluster",
    index: first,
    band: [first - (block >> 1), Math.max(first, alarm.suspect)],
    growthPerStep: null,
  };
}

/** Whether what looks louder since `suspect` is spikes on a signal that is as quiet as before. */
export function isSpikeCluster(residual: BaselineResidual, suspect: number): boolean {
  const { e, baseline, to } = residual;
  const usual = scaleOf(e.subarray(baseline.from, baseline.to));
  const since = e.subarray(Math.max(suspect, baseline.from), to);
  if (scaleOf(since) > QUIET_RISE * usual) return false;
  return since.reduce((count, v) => count + (Math.abs(v) > SPIKE_LIMIT * usual ? 1 : 0), 0) >= SPIKES_MIN;
}

function firstSpike({ e, baseline }: BaselineResidual, start: number, to: number): number | null {
  const limit = SPIKE_LIMIT * scaleOf(e.subarray(baseline.from, baseline.to));
  for (let t = Math.max(start, baseline.from); t < to; t++) if (Math.abs(e[t]!) > limit) return t;
  return null;
}

function scaleOf(values: Float64Array): number {
  return robustScale(values, values.length, new Float64Array(values.length));
}
