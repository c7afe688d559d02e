import type { OnsetKind } from "../../orchestrator/contract/index.ts";
import { type BaselineResidual, baselineResidual, searchStart } from "./baseline-residual.ts";
import { blockLogRms } from "./block-log-rms.ts";
import { bestChange, meanSquareCost } from "./change-point.ts";
import { DUST_SHARE } from "./channel-monitor.ts";
import { fitGrowth, type GrowthFit, onsetBand } from "./growth-fit.ts";
import { isSpikeCluster, locateSpikes } from "./locate-spikes.ts";
import type { Located } from "./located.ts";
import type { MonitorLayout } from "./monitor-layout.ts";
import { growingScaleLikelihood } from "./scale-likelihood.ts";

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
/** Rate, e-folds a block, above which shorter blocks are used. */
const FAST_RATE = 0.5;

/**
 * Locates a growth, or an abrupt rise of the fluctuations, around an alarm.
 *
 * Periods and level are learnt from the first 60 % before the alarm, and once more from all that the first fit shows to
 * be sound. Onset is where the growing part is as strong as the noise; a jump is placed by the likelihood of two
 * mean squares.
 *
 * @param x shape [n], finite up to `to`
 * @param alarm.to first sample that cannot be used
 */
export function locateGrowth(
  x: Float64Array,
  layout: MonitorLayout,
  alarm: { index: number; suspect: number; to: number; monotone: boolean },
): Located {
  const { block } = layout;
  const from = searchStart(layout, alarm.index);
  const to = Math.min(alarm.to, alarm.index + 1 + BLOCKS_AFTER * block);
  const span = Math.min(alarm.index + 1, to) - from;
  let baselineEnd = from + Math.round(FIRST_BASELINE * span);
  let residual = baselineResidual(x, layout, { from, baselineEnd, to }, DUST_SHARE);
  if (isSpikeCluster(residual, alarm.suspect)) return locateSpikes(x, layout, { suspect: alarm.suspect, to });
  let fit = fitBlocks(residual, block);
  for (let pass = 0; pass < 2; pass++) {
    baselineEnd = Math.round(Math.max(from + 4 * block, Math.min(alarm.index, fit.band[0] - block)));
    residual = baselineResidual(x, layout, { from, baselineEnd, to }, DUST_SHARE);
    fit = fitBlocks(residual, block, { near: fit });
  }
  if (fit.onset > alarm.index) return notPlaced(alarm, from, block);
  const maybeJump = isAbrupt(fit);
  if (maybeJump || fit.rate * block > FAST_RATE) fit = fitFast(residual, fit, block);
  if (maybeJump) {
    const jump = locateJump(residual, fit, layout);
    if (jump.advantage > JUMP_ADVANTAGE) return jump.located;
  }
  return growthFound(residual, fit, alarm.monotone);
}

/** Where no growth fits before the alarm: somewhere between a few blocks before the monitor's first doubt and the alarm. */
function notPlaced(alarm: { index: number; suspect: number }, from: number, block: number): Located {
  const index = Math.min(alarm.suspect, alarm.index);
  const band = [Math.max(from, index - 5 * block), alarm.index] as const;
  return { kind: "growing-oscillation", index, band, growthPerStep: null };
}

/** A growth fit in samples instead of blocks. */
interface SampleFit {
  readonly block: number;
  readonly onset: number;
  readonly saturation: number;
  /** E-folds a step. */
  readonly rate: number;
  readonly band: readonly [number, number];
  readonly base: number;
}

function fitBlocks(
  residual: BaselineResidual,
  block: number,
  { from = residual.from, near }: { from?: number; near?: SampleFit } = {},
): SampleFit {
  const y = blockLogRms(residual.e, { from, to: residual.to, block, floor: residual.floor });
  const inBlocks = (sample: number) => (sample - from) / block - 0.5;
  const start = near && {
    onset: inBlocks(near.onset),
    rate: near.rate * block,
    saturation: inBlocks(near.saturation),
  };
  const fit: GrowthFit = fitGrowth(y, start);
  const sample = (j: number) => from + (j + 0.5) * block;
  const [first, last] = onsetBand(y, fit);
  return {
    block,
    onset: sample(fit.onset),
    saturation: sample(fit.saturation),
    rate: fit.rate / block,
    band: [sample(first), sample(last)],
    base: fit.base,
  };
}

function isAbrupt(fit: SampleFit): boolean {
  const span = fit.saturation - fit.onset;
  return span <= ABRUPT_BLOCKS * fit.block && fit.rate * span < ABRUPT_EFOLDS;
}

/** Repeats a fast fit with blocks of 6 to 10 steps around the onset. */
function fitFast(residual: BaselineResidual, fit: SampleFit, block: number): SampleFit {
  const short = Math.min(block, Math.max(6, Math.min(10, Math.round(FAST_RATE / fit.rate))));
  if (short >= block) return fit;
  const back = Math.floor(Math.min(fit.onset - residual.from, 20 * block) / short);
  const start = Math.max(residual.from, Math.round(fit.onset) - back * short);
  return fitBlocks(residual, short, { from: start });
}

/** The jump that is most likely around a fit, and what it gains over the fit in twice the log likelihood. */
function locateJump(
  residual: BaselineResidual,
  fit: SampleFit,
  layout: MonitorLayout,
): { located: Located; advantage: number } {
  const { e, from, to, floor, correlation } = residual;
  const centre = Math.round(fit.onset);
  const a = Math.max(from, centre - 20 * layout.block);
  const b = Math.min(to, centre + 8 * layout.block);
  const squares = correlation * correlation;
  const inflation = (1 + squares) / (1 - squares);
  const cost = meanSquareCost(e.subarray(a, b), 0, floor);
  const change = bestChange(cost, { from: 0, to: b - a, shortest: 5, inflation });
  const split = -cost(0, change.index) - cost(change.index, b - a) - (b - a);
  return {
    located: {
      kind: "wake-breakdown",
      index: a + change.index,
      band: [a + change.band[0] - 2, a + change.band[1] + 2],
      growthPerStep: null,
    },
    advantage: (split - growingScaleLikelihood(e, { from: a, to: b, floor }, fit)) / inflation,
  };
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

/** Samples a block, and e-folds over the baseline, that make the end of a history a growth. */
const LAST_BLOCK = 5;
const LAST_EFOLDS = 1.5;

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
