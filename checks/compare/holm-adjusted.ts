import { AppError } from "../../orchestrator/contract/index.ts";

/**
 * p-values adjusted for being looked at together, by Holm's step-down rule: a finding holds in the family at level α if
 * its adjusted p is at most α.
 *
 *   p(1) <= … <= p(m):  p̃(i) = max over j <= i of min(1, (m − j + 1)·p(j))
 *
 * For tests (which differences from the baseline are real); intervals take `confidencePerChannel`. Never weaker than
 * Bonferroni, and like it without any assumption on dependence.
 *
 * @param p shape [m], each in [0, 1]
 * @returns shape [m], in the order given; empty for empty
 * @throws USAGE for a value outside [0, 1]
 * @see Holm (1979), A simple sequentially rejective multiple test procedure
 */
export function holmAdjusted(p: readonly number[]): number[] {
  const bad = p.findIndex((value) => !(value >= 0 && value <= 1));
  if (bad >= 0)
    throw new AppError("USAGE", `p-value ${bad} is ${p[bad]}`, { fix: "give values from 0 to 1" });
  const adjusted = new Array<number>(p.length).fill(1);
  const rising = p.map((_, i) => i).sort((i, j) => p[i]! - p[j]!);
  let largest = 0;
  rising.forEach((index, rank) => {
    largest = Math.max(largest, Math.min(1, (p.length - rank) * p[index]!));
    adjusted[index] = largest;
  });
  return adjusted;
}
