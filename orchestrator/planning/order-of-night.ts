import { spreadingOrder } from "./night-order.ts";
import type { BookedRun } from "./run-book.ts";

/**
 * Run ids in the order in which the night begins them: baselines first, since without them no difference can be given;
 * then the sweep, spread over its axes, so that a night cut short still spans the whole; then single cases; then companions.
 */
export function orderOfNight(runs: readonly BookedRun[]): string[] {
  const comparedWith = new Set(runs.map((run) => run.baselineRunId));
  const isBaseline = (run: BookedRun) => run.role === "baseline" || comparedWith.has(run.runId);
  const rest = runs.filter((run) => !isBaseline(run));
  const ordered = [
    ...spread(runs.filter(isBaseline)),
    ...spread(rest.filter((run) => run.role === "sweep")),
    ...rest.filter((run) => run.role === "single"),
    ...rest.filter((run) => run.role === "companion"),
  ];
  return ordered.map((run) => run.runId);
}

/** Runs spread over the sweep; runs at one point (variants) follow one another. */
function spread(runs: readonly BookedRun[]): BookedRun[] {
  const points = new Map<string, BookedRun[]>();
  const apart: BookedRun[] = [];
  for (const run of runs) {
    if (run.draft.position === null) {
      apart.push(run);
      continue;
    }
    const key = run.draft.position.join(" ");
    const group = points.get(key);
    if (group === undefined) points.set(key, [run]);
    else group.push(run);
  }
  const groups = [...points.values()];
  const order = spreadingOrder(groups.map(([first]) => first!.draft.position!));
  return [...order.flatMap((index) => groups[index]!), ...apart];
}
