import { AppError } from "../../orchestrator/contract/index.ts";
import type { Estimate } from "./estimate.ts";

/** Half-width of a difference, with the rule that made it. */
export interface CombinedHalfWidth {
  readonly halfWidth: number;
  readonly rule: "root sum of squares" | "sum";
  readonly because: string;
}

/**
 * Half-width of the difference of two means at their common confidence.
 *
 *   independent:  h = sqrt(h1² + h2²)
 *   otherwise:    h = h1 + h2
 *
 * The sum holds whatever the correlation is, since sd(x1 − x2) <= sd(x1) + sd(x2); it is also taken where one of the two
 * is a bound of a record at rest, because bounds don't average out.
 *
 * Limits: the root sum of squares covers at least at the stated confidence for independent normal means with Student
 * half-widths of any degrees of freedom (it errs to the wide side for few); it undercovers if the two go against each other.
 *
 * @param a half-width >= 0, same confidence as b
 * @returns half-width >= 0; 0 for two constants
 * @throws USAGE for different confidences, or half-widths that are negative or not finite
 * @see Banerjee (1960), for two and more means with separate Student half-widths (from memory)
 */
export function combineHalfWidths(a: Estimate, b: Estimate, independent: boolean): CombinedHalfWidth {
  if (Math.abs(a.confidence - b.confidence) > 1e-12)
    throw new AppError("USAGE", `half-widths at ${a.confidence} and at ${b.confidence} can't be combined`, {
      fix: "judge both at the same confidence",
    });
  for (const { halfWidth } of [a, b])
    if (!(halfWidth >= 0 && halfWidth < Number.POSITIVE_INFINITY))
      throw new AppError("USAGE", `a half-width of ${halfWidth} can't be combined`, {
        fix: "give finite half-widths, zero or more",
      });
  const sum = a.halfWidth + b.halfWidth;
  if (!independent)
    return { halfWidth: sum, rule: "sum", because: "the two may be correlated in a way that is not known" };
  if (a.isBound || b.isBound)
    return {
      halfWidth: sum,
      rule: "sum",
      because: "a half-width that bounds a record at rest does not average out",
    };
  return {
    halfWidth: Math.hypot(a.halfWidth, b.halfWidth),
    rule: "root sum of squares",
    because: "the two histories are independent",
  };
}
