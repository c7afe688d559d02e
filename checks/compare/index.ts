// What follows from several judged averages: difference from a baseline, refinement of the numerics, fatigue cycles,
// confidence of a family of channels, uncertainty budget. Not here: the judgement of one channel (../mean).
// Read compare-with-baseline.ts first, then refinement-study.ts.
export { combineHalfWidths } from "./combine-half-widths.ts";
export { type ComparedRun, compareWithBaseline } from "./compare-with-baseline.ts";
export { damageEquivalentAmplitude } from "./damage-equivalent-amplitude.ts";
export type { Difference } from "./difference.ts";
export { type Estimate, estimateOf } from "./estimate.ts";
export { confidenceOfFamily, confidencePerChannel } from "./family-confidence.ts";
export { gridConvergenceIndex, SAFETY_THREE_GRIDS } from "./grid-convergence-index.ts";
export { holmAdjusted } from "./holm-adjusted.ts";
export { observedOrder } from "./observed-order.ts";
export { type CycleCount, rainflow } from "./rainflow.ts";
export { ratioInterval } from "./ratio-interval.ts";
export { type RefinementLevel, type RefinementStudy, refinementStudy } from "./refinement-study.ts";
export { type Forcing, sharedForcing } from "./shared-forcing.ts";
export { turningPoints } from "./turning-points.ts";
export { type UncertaintyBudget, uncertaintyBudget } from "./uncertainty-budget.ts";
