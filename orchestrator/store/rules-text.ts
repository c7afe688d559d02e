import type { Plan, PlannedRun } from "../contract/index.ts";
import { canonicalJson } from "../planning/run-id.ts";

/** Everything by which a campaign judges a run, as one text: equal texts give equal verdicts. */
export function rulesText(plan: Plan, run: PlannedRun): string {
  return canonicalJson({
    accept: plan.accept,
    onset: plan.onset,
    remedies: plan.remedies,
    longestSteps: run.longestSteps,
    shortestSteps: run.shortestSteps,
    periods: run.periods,
  });
}
