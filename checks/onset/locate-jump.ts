import type { BaselineResidual } from "./baseline-residual.ts";
import { bestChange, meanSquareCost } from "./change-point.ts";
import type { Located } from "./located.ts";
import type { MonitorLayout } from "./monitor-layout.ts";
import type { SampleFit } from "./sample-fit.ts";
import { growingScaleLikelihood } from "./scale-likelihood.ts";

/** The jump that is most likely around a fit, and what it gains over the fit in twice the log likelihood. */
export function locateJump(
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
