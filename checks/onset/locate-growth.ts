import type { OnsetKind } from "../../orchestrator/contract/index.ts";
import { type BaselineResidual, baselineResidual, searchStart } from "./baseline-residual.ts";
import { DUST_SHARE } from "./dust.ts";
import { beforeDecline } from "./growth-end.ts";
import { locateJump } from "./locate-jump.ts";
import { isSpikeCluster, locateSpikes } from "./locate-spikes.ts";
import type { Located } from "./located.ts";
import type { MonitorLayout } from "./monitor-layout.ts";
import { fitBlocks, fitFast, isFast, type SampleFit } from "./sample-fit.ts";

/** Blocks after an alarm that are used where the history goes on. */
const BLOCKS_AFTER = 20;
/** Share of the stretch before the alarm that is taken as sound to begin with. */
const FIRST_BASELINE = 0.6;
/** A rise within this many blocks and e-folds has no growth rate: it is a jump. */
const ABRUPT_BLOCKS = 3;
const ABRUPT_EFOLDS = 4;
/**
 * What a jump has to gain over a growth in twice the log likelihood to be preferred: it has two parameters fewer, and the
 * growth was not fitted by likelihood.
 */
const JUMP_ADVANTAGE = -10;

/**
 * Locates a growth, or an abrupt rise of the fluctuations, around an alarm.
 *
 * Periods and level are learnt from the first 60 % before the alarm, and once more from all that the first fit shows to
 * be sound. Onset is where the growing part is as strong as the noise; a jump is placed by the likelihood of two
 * mean squares.
 *
 * @param x shape [n], finite up to `to`
 * @param alarm.to first sample that cannot be used
 * @returns null where nothing before the alarm is quiet enough to rise from
 */
export function locateGrowth(
  x: Float64Array,
  layout: MonitorLayout,
  alarm: { index: number; suspect: number; to: number; monotone: boolean },
): Located | null {
  const { block } = layout;
  const from = searchStart(layout, alarm.index);
  const to = Math.min(alarm.to, alarm.index + 1 + BLOCKS_AFTER * block);
  const span = Math.min(alarm.index + 1, to) - from;
  let baselineEnd = from + Math.round(FIRST_BASELINE * span);
  let residual = baselineResidual(x, layout, { from, baselineEnd, to }, DUST_SHARE);
  if (isSpikeCluster(residual, alarm.suspect)) return locateSpikes(x, layout, { suspect: alarm.suspect, to });
  const end = beforeDecline(residual, block, alarm.index);
  let fit = fitBlocks({ ...residual, to: end }, block);
  for (let pass = 0; pass < 2; pass++) {
    baselineEnd = Math.round(Math.max(from + 4 * block, Math.min(alarm.index, fit.band[0] - block)));
    residual = baselineResidual(x, layout, { from, baselineEnd, to: end }, DUST_SHARE);
    fit = fitBlocks(residual, block, { near: fit });
  }
  if (fit.onset > alarm.index) return null;
  const maybeJump = isAbrupt(fit);
  if (maybeJump || isFast(fit)) fit = fitFast(residual, fit, block);
  if (maybeJump) {
    const jump = locateJump(residual, fit, layout);
    if (jump.advantage > JUMP_ADVANTAGE) return jump.located;
  }
  return growthFound(residual, fit, alarm.monotone);
}

function isAbrupt(fit: SampleFit): boolean {
  const span = fit.saturation - fit.onset;
  return span <= ABRUPT_BLOCKS * fit.block && fit.rate * span < ABRUPT_EFOLDS;
}

function growthFound(residual: BaselineResidual, fit: SampleFit, monotone: boolean): Located {
  const widen = fit.block / 2 + 0.25 / fit.rate;
  return {
    kind: kindOf(residual, fit, monotone),
    index: Math.round(fit.onset),
    band: [Math.floor(fit.band[0] - widen), Math.ceil(fit.band[1] + widen)],
    growthPerStep: fit.rate,
  };
}

/** Bounded growth is a breakdown of the wake; unbounded growth has one sign or oscillates. */
function kindOf(residual: BaselineResidual, fit: SampleFit, monotone: boolean): OnsetKind {
  const flat = residual.to - fit.saturation;
  if (flat >= Math.max(3 * fit.block, 1 / fit.rate)) return "wake-breakdown";
  if (monotone) return "blow-up";
  const start = Math.min(residual.to - 10, Math.max(residual.from, Math.round(fit.onset + 1 / fit.rate)));
  let [sum, size] = [0, 0];
  for (let t = Math.max(residual.from, start); t < residual.to; t++) {
    // Each sample weighs alike whatever the growth has made of it.
    const scale = Math.exp(-fit.rate * (t - start));
    sum += residual.e[t]! * scale;
    size += Math.abs(residual.e[t]!) * scale;
  }
  return Math.abs(sum) > 0.8 * size ? "blow-up" : "growing-oscillation";
}
