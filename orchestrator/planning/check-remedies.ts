import { caseProblems, checkCase } from "./check-case.ts";
import { applyChanges } from "./field-path.ts";
import type { Campaign } from "./parse-campaign.ts";
import type { Problem } from "./problem.ts";
import type { BookedRun } from "./run-book.ts";
import { originOf } from "./run-draft.ts";

/** Runs on which each remedy is tried out at planning time. */
const RUNS_TRIED = 100;

/** Remedies that would make an impossible case: better known now than at three in the morning. */
export function remedyProblems(campaign: Campaign, runs: readonly BookedRun[]): Problem[] {
  return campaign.file.remedies.flatMap(({ set }, i) =>
    runs.slice(0, RUNS_TRIED).flatMap((run) => {
      const inputs = applyChanges(run.inputs, set);
      const checked = checkCase(inputs);
      if (checked.kind === "case") return [];
      const trail = [...run.draft.trail, { changes: set, at: ["remedies", i], keyed: true }];
      const placeOf = (path: readonly PropertyKey[]) =>
        campaign.placeOf(originOf({ ...run.draft, trail }, path as (string | number)[]));
      return caseProblems(checked.issues, inputs, placeOf);
    }),
  );
}
