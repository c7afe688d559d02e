import { baselineResidual } from "./baseline-residual.ts";
import { bestChange, meanCost } from "./change-point.ts";
import { DUST_SHARE } from "./dust.ts";
import type { Located } from "./located.ts";
import { medianInPlace } from "./median-in-place.ts";
import type { MonitorLayout } from "./monitor-layout.ts";

/** Blocks on either side of the suspected step that are used. */
const BLOCKS_BEFORE = 12;
const BLOCKS_AFTER = 6;

/**
 * Locates a step of the mean by least squares.
 *
 *   k = argmin Σ_{t<k}(e_t − mean)² + Σ_{t>=k}(e_t − mean)²
 *
 * The band counts correlated noise by (1 + ρ)/(1 − ρ), ρ from differences of neighbours.
 *
 * @param x shape [n], finite up to `to`
 * @param alarm.suspect rough place of the step
 */
export function locateMeanShift(
  x: Float64Array,
  layout: MonitorLayout,
  alarm: { suspect: number; to: number },
): Located {
  const { block, skip } = layout;
  const to = Math.min(alarm.to, alarm.suspect + BLOCKS_AFTER * block);
  const from = Math.max(skip, alarm.suspect - BLOCKS_BEFORE * block);
  const stretch = { from: skip, baselineEnd: Math.max(skip, alarm.suspect - 2 * block), to };
  const { e } = baselineResidual(x, layout, stretch, DUST_SHARE);
  const values = e.slice(Math.max(from, e.findIndex(Number.isFinite)), to);
  const start = to - values.length;
  const { variance, correlation } = noiseBeside(values, alarm.suspect - start, block);
  const change = bestChange(meanCost(values, variance), {
    from: 0,
    to: values.length,
    shortest: Math.max(2, block >> 1),
    inflation: (1 + correlation) / (1 - correlation),
  });
  return {
    kind: "mean-shift",
    index: start + change.index,
    band: [start + change.band[0] - 1, start + change.band[1] + 1],
    growthPerStep: null,
  };
}

/** Variance and lag-1 correlation away from the step, each side about its own median. */
function noiseBeside(
  values: Float64Array,
  suspect: number,
  block: number,
): { variance: number; correlation: number } {
  let [square, cross, n] = [0, 0, 0];
  for (const side of [values.slice(0, Math.max(2, suspect - 2 * block)), values.slice(suspect + block)]) {
    const centre = medianInPlace(Float64Array.from(side), side.length);
    for (let i = 1; i < side.length; i++) {
      square += (side[i]! - centre) ** 2;
      cross += (side[i]! - centre) * (side[i - 1]! - centre);
      n++;
    }
  }
  const correlation = square > 0 ? Math.max(0, Math.min(0.95, cross / square)) : 0;
  return { variance: Math.max(square / Math.max(1, n), Number.MIN_VALUE), correlation };
}
