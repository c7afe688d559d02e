import type { ChannelJudgement } from "../contract/index.ts";
import type { CampaignRun } from "../store/rows.ts";
import type { UncertaintyBudget } from "./api.ts";

/** What the companions of a run say about one of its loads. */
export interface SufficiencyFinding {
  readonly sufficiency: UncertaintyBudget["sufficiency"];
  /** `depends-on-wake-length` and the like, where a companion differs by more than the tolerance; `wake-length-not-compared` where it has no usable average. */
  readonly warnings: readonly string[];
}

/**
 * Compares a load with the companions that test whether its numerics suffice: the same case with a longer wake, a smaller
 * step, more strips. A stationary average is no proof that the wake was long enough.
 */
export function sufficiencyOf(
  run: CampaignRun,
  channel: string,
  companions: readonly CampaignRun[],
): SufficiencyFinding {
  const own = usable(run, channel);
  const sufficiency: UncertaintyBudget["sufficiency"][number][] = [];
  const warnings: string[] = [];
  for (const companion of companions) {
    const aspect = companion.planned.companionOf?.aspect;
    if (aspect === undefined || own === null) continue;
    const other = usable(companion, channel);
    if (other === null) {
      warnings.push(`${aspect}-not-compared`);
      continue;
    }
    const difference = other.mean - own.mean;
    const exceedsTolerance = own.tolerance !== null && Math.abs(difference) > own.tolerance;
    sufficiency.push({ aspect, companionRunId: companion.runId, difference, exceedsTolerance });
    if (exceedsTolerance) warnings.push(`depends-on-${aspect}`);
  }
  return { sufficiency, warnings: [...new Set(warnings)] };
}

/**
 * Whether the window of a load ends before the kept wake can have come back to the wing on a closed path.
 *
 * @param toIndex first sample after the window
 */
export function beforeWakeReturn(run: CampaignRun, toIndex: number): boolean {
  const { wakeReturnSteps, dtSeconds } = run.planned;
  // The plan counts in planned steps; a remedy may have changed the step.
  return wakeReturnSteps !== null && toIndex * run.dtSeconds < wakeReturnSteps * dtSeconds;
}

function usable(run: CampaignRun, name: string): { mean: number; tolerance: number | null } | null {
  const channel: ChannelJudgement | undefined = run.judgement?.channels[name];
  if (run.verdict !== "accepted" || channel?.verdict !== "accepted" || channel.mean === null) return null;
  return { mean: channel.mean, tolerance: channel.tolerance };
}
