import { AppError } from "../../orchestrator/contract/index.ts";
import type { CycleCount } from "./rainflow.ts";

/** The one amplitude that does the same damage as a whole spectrum, with what it refers to. */
export interface DamageEquivalent {
  /** Half the equivalent range, in the load's unit. */
  readonly amplitude: number;
  readonly range: number;
  readonly slope: number;
  /** Number of cycles of that amplitude that stands for the window. */
  readonly equivalentCycles: number;
  /** Cycles counted in the window. */
  readonly countedCycles: number;
  readonly words: string;
}

/**
 * Damage-equivalent amplitude of a cycle count, for a straight S–N line of slope m and linear damage.
 *
 *   Δeq = (Σ nᵢ·Δᵢ^m / N)^(1/m), amplitude Δeq/2
 *
 * N is a free reference and the result means nothing without it: commonly one cycle a second of the window, or one a
 * revolution (common practice, no source).
 *
 * Limits: mean loads, knees and cut-offs of the S–N line and the order of the cycles are left out. It is no fatigue
 * verification: loads here are aerodynamic coefficients of a window, not stresses of a life.
 *
 * @param slope m >= 1, about 3 to 5 for steel, about 10 for glass fibre (common practice, no source)
 * @param equivalentCycles N > 0
 * @returns 0 for no cycles
 * @throws USAGE for slope or N out of range
 * @see Palmgren (1924); Miner (1945), Cumulative damage in fatigue
 */
export function damageEquivalentAmplitude(
  counted: CycleCount,
  { slope, equivalentCycles }: { readonly slope: number; readonly equivalentCycles: number },
): DamageEquivalent {
  refuseUnless(slope >= 1 && Number.isFinite(slope), `an S–N slope of ${slope}`, "a number of at least 1");
  refuseUnless(
    equivalentCycles > 0 && Number.isFinite(equivalentCycles),
    `a reference of ${equivalentCycles} cycles`,
    "a number above zero",
  );
  let largest = 0;
  for (const { range } of counted.cycles) largest = Math.max(largest, range);
  // Shares of the largest range, so that high slopes neither overflow nor vanish.
  let damage = 0;
  for (const { range, count } of counted.cycles) damage += count * (range / largest) ** slope;
  const range = largest === 0 ? 0 : largest * (damage / equivalentCycles) ** (1 / slope);
  const words = `amplitude ${range / 2} does the damage of ${counted.total} counted cycles in ${equivalentCycles} equal ones (slope ${slope}, linear damage, mean loads left out, open cycles counted as ${counted.residue === "repeating" ? "those of a repeating history" : "halves"})`;
  return {
    amplitude: range / 2,
    range,
    slope,
    equivalentCycles,
    countedCycles: counted.total,
    words,
  };
}

function refuseUnless(holds: boolean, what: string, allowed: string): void {
  if (!holds) throw new AppError("USAGE", `${what} has no meaning`, { fix: `give ${allowed}` });
}
