import { combineHalfWidths } from "./combine-half-widths.ts";
import type { Estimate } from "./estimate.ts";
import { gridConvergenceIndex, SAFETY_THREE_GRIDS, SAFETY_TWO_GRIDS } from "./grid-convergence-index.ts";
import { type ObservedOrder, observedOrder } from "./observed-order.ts";
import { type LevelChange, levelChanges, type RefinementLevel, sortedLevels } from "./refinement-levels.ts";
import { refinementWords } from "./refinement-words.ts";

export type { RefinementLevel } from "./refinement-levels.ts";

/** What a refinement axis shows for one load. */
export interface RefinementStudy {
  /** `within-noise`: the changes lie within their statistical half-widths, no order can be observed. */
  readonly kind: ObservedOrder["kind"] | "within-noise" | "two-levels";
  readonly fineFirst: readonly RefinementLevel[];
  readonly changes: readonly LevelChange[];
  /** Order observed on the finest three levels, and the range that the half-widths allow; an end of null is open. */
  readonly order: number | null;
  readonly orderRange: readonly [number | null, number | null] | null;
  /** Order used for extrapolation and index: the observed one, but never above the formal one. */
  readonly orderUsed: number | null;
  /** Value at size zero, with the half-width it inherits from the averages, the order taken as known. */
  readonly extrapolated: { readonly mean: number; readonly statisticalHalfWidth: number } | null;
  /** Grid convergence index of the finest level, in the load's unit. Contains nothing statistical. */
  readonly discretisation: number | null;
  /** Half-width of the finest level's average. Contains nothing of the discretisation. */
  readonly statistical: number;
  /** Order of every triplet of neighbours, the finest first; null where noise hides it. */
  readonly orders: readonly (ObservedOrder | null)[];
  readonly warnings: readonly string[];
  readonly words: string;
}

/** Refinement by less than this lets other errors pass for discretisation (Celik et al. 2008). */
const RATIO_MIN = 1.3;
/** Below this an order says that the levels are too coarse to extrapolate from: common practice, no source. */
const ORDER_MIN = 0.5;

/**
 * Judges a refinement axis: observed order, Richardson extrapolation, grid convergence index, on the finest three levels.
 *
 *   φext = φ1 + (φ1 − φ2)/(r21^p − 1),  GCI = 1.25·|φ1 − φ2|/(r21^p − 1)
 *
 * The averages carry statistical half-widths. Where one of the two changes lies within that of its own, the sign and size
 * of the change are chance, and no order is computed from it. Two levels need the formal order, and get the larger factor
 * of safety 3.
 *
 * Limits: an estimate, valid where a single power of the size governs the error. The order's range takes the two changes
 * as independent, which is too wide, since they share the middle level.
 *
 * @param levels two or more, any order
 * @throws USAGE for levels that can't be compared
 * @see Roache (1994); Celik et al. (2008); Richardson (1911)
 */
export function refinementStudy(
  levels: readonly RefinementLevel[],
  { formalOrder }: { readonly formalOrder?: number | undefined } = {},
): RefinementStudy {
  const fineFirst = sortedLevels(levels);
  const changes = levelChanges(fineFirst);
  const orders = changes.slice(1).map((_, i) => tripletOrder(fineFirst, changes, i));
  const kind = kindOf(changes, orders[0] ?? null);
  const order = orders[0]?.order ?? null;
  const orderUsed = usedOrder(kind, order, formalOrder);
  const safety = order === null ? SAFETY_TWO_GRIDS : SAFETY_THREE_GRIDS;
  const { change, ratio } = changes[0]!;
  const without: Omit<RefinementStudy, "words"> = {
    kind,
    fineFirst,
    changes,
    order,
    orderRange: order === null ? null : orderRange(changes),
    orderUsed,
    extrapolated: orderUsed === null ? null : extrapolate(fineFirst[0]!, fineFirst[1]!, ratio, orderUsed),
    discretisation:
      orderUsed === null ? null : gridConvergenceIndex(change, { ratio, order: orderUsed, safety }),
    statistical: fineFirst[0]!.halfWidth,
    orders,
    warnings: warningsOf(kind, order, changes, formalOrder),
  };
  return { ...without, words: refinementWords(without, formalOrder) };
}

function tripletOrder(
  fineFirst: readonly RefinementLevel[],
  changes: readonly LevelChange[],
  i: number,
): ObservedOrder | null {
  if (!changes[i]!.told || !changes[i + 1]!.told) return null;
  const values = [fineFirst[i]!.mean, fineFirst[i + 1]!.mean, fineFirst[i + 2]!.mean] as const;
  return observedOrder({ values, r21: changes[i]!.ratio, r32: changes[i + 1]!.ratio });
}

function kindOf(changes: readonly LevelChange[], seen: ObservedOrder | null): RefinementStudy["kind"] {
  if (changes.slice(0, 2).some((change) => !change.told)) return "within-noise";
  return seen === null ? "two-levels" : seen.kind;
}

function usedOrder(
  kind: RefinementStudy["kind"],
  order: number | null,
  formal: number | undefined,
): number | null {
  if (kind === "two-levels") return formal ?? null;
  return order === null ? null : Math.min(order, formal ?? order);
}

/** Orders at the ends of both changes: the smallest with the finer change large, the largest with it small. */
function orderRange(changes: readonly LevelChange[]): readonly [number | null, number | null] {
  const [fine, coarse] = [changes[0]!, changes[1]!];
  const at = (fineBy: number, coarseBy: number) => {
    const e21 = grown(fine, fineBy);
    const e32 = grown(coarse, coarseBy);
    return observedOrder({ values: [-e21, 0, e32], r21: fine.ratio, r32: coarse.ratio }).order;
  };
  return [at(1, -1), at(-1, 1)];
}

function grown({ change, halfWidth }: LevelChange, by: number): number {
  return change + Math.sign(change) * by * halfWidth;
}

function extrapolate(fine: Estimate, coarse: Estimate, ratio: number, order: number) {
  const k = 1 / Math.expm1(order * Math.log(ratio));
  const { halfWidth } = combineHalfWidths(
    { ...fine, halfWidth: (1 + k) * fine.halfWidth },
    { ...coarse, halfWidth: k * coarse.halfWidth },
    true,
  );
  return { mean: fine.mean + k * (fine.mean - coarse.mean), statisticalHalfWidth: halfWidth };
}

function warningsOf(
  kind: RefinementStudy["kind"],
  order: number | null,
  changes: readonly LevelChange[],
  formal: number | undefined,
): string[] {
  const warnings: string[] = [];
  if (changes.slice(0, 2).some(({ ratio }) => ratio < RATIO_MIN)) warnings.push("refined-by-less-than-1.3");
  if (order !== null && order < ORDER_MIN) warnings.push("order-below-half");
  if (order !== null && formal !== undefined && order > formal) warnings.push("order-above-formal");
  if (kind === "oscillatory") warnings.push("oscillatory");
  return warnings;
}
