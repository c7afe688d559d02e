import type { LegOrder, Plan } from "../contract/index.ts";
import type { LegClaim } from "../store/store.ts";

/** The order for a leg that was claimed. The fence in their names keeps the files of every try apart. */
export function legOrderOf(
  claim: LegClaim,
  { plan, folder, budgetSeconds }: { plan: Plan; folder: string; budgetSeconds: number },
): LegOrder {
  const { run } = claim;
  return {
    kind: "leg",
    legId: `${run.runId}.${claim.attempt}.${claim.fence}`,
    files: `runs/${run.runId}/attempt${claim.attempt}.try${claim.fence}`,
    runId: run.runId,
    attempt: claim.attempt,
    solver: claim.solver,
    inputs: claim.inputs,
    folder,
    history: [...claim.history],
    checkpoint: claim.checkpoint,
    rules: {
      accept: plan.accept,
      onset: plan.onset,
      dtSeconds: run.planned.dtSeconds,
      longestSteps: run.planned.longestSteps,
      shortestSteps: run.planned.shortestSteps,
    },
    judgedSteps: claim.judgedSteps,
    budgetSeconds,
    endedBecause: claim.endedBecause,
  };
}
