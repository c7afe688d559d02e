import { AppError } from "../../orchestrator/contract/index.ts";
import { combineHalfWidths } from "./combine-half-widths.ts";
import type { Estimate } from "./estimate.ts";

/** One level of a refinement axis. */
export interface RefinementLevel extends Estimate {
  readonly label: string;
  /** Size that refinement makes smaller: step, panel width, 1/strips, 1/wake length; above zero. */
  readonly size: number;
}

/** From one level to the next finer one: what changed, and how well that is known. */
export interface LevelChange {
  readonly from: string;
  readonly to: string;
  readonly ratio: number;
  /** Coarser value less finer value. */
  readonly change: number;
  readonly halfWidth: number;
  /** The change exceeds its statistical half-width, or there is none (noise-free values). */
  readonly told: boolean;
}

/**
 * Levels sorted from fine to coarse.
 *
 * @throws USAGE for fewer than two levels, equal sizes, sizes not above zero, values that are not finite
 */
export function sortedLevels(levels: readonly RefinementLevel[]): RefinementLevel[] {
  if (levels.length < 2) refuse(`${levels.length} level is no refinement`, "give two levels at least");
  for (const { label, size, mean, halfWidth } of levels) {
    if (!(size > 0 && Number.isFinite(size)))
      refuse(`level ${label} has size ${size}`, "give one above zero");
    if (!Number.isFinite(mean) || !(halfWidth >= 0 && Number.isFinite(halfWidth)))
      refuse(
        `level ${label} has the value ${mean} ± ${halfWidth}`,
        "leave out levels without a usable average",
      );
  }
  const sorted = [...levels].sort((a, b) => a.size - b.size);
  for (let i = 1; i < sorted.length; i++)
    if (!(sorted[i]!.size > sorted[i - 1]!.size * (1 + 1e-9)))
      refuse(`levels ${sorted[i - 1]!.label} and ${sorted[i]!.label} are of one size`, "give each size once");
  return sorted;
}

/** Changes between neighbouring levels, the finest pair first. */
export function levelChanges(fineFirst: readonly RefinementLevel[]): LevelChange[] {
  return fineFirst.slice(1).map((coarser, i) => {
    const finer = fineFirst[i]!;
    const change = coarser.mean - finer.mean;
    const { halfWidth } = combineHalfWidths(finer, coarser, true);
    return {
      from: coarser.label,
      to: finer.label,
      ratio: coarser.size / finer.size,
      change,
      halfWidth,
      told: Math.abs(change) > halfWidth || halfWidth === 0,
    };
  });
}

function refuse(what: string, fix: string): never {
  throw new AppError("USAGE", what, { fix });
}
