import Table from "cli-table3";
import type { Plan, PlannedRun } from "../contract/index.ts";
import { secondsUntil } from "../planning/index.ts";
import { formatDuration } from "./format-value.ts";

/** Runs printed one a line; of a longer list the beginning is shown. */
const ROWS_SHOWN = 60;

/** When the night begins, on how many workers, and how much of the plan is printed. */
export interface PlanView {
  readonly now: Date;
  readonly workers: number;
  readonly showAll: boolean;
}

/** A plan for a reader: count, table, order, cost, end, warnings. */
export function planWords(plan: Plan, view: PlanView): string {
  return [
    `${plan.title}: ${countWords(plan)}`,
    ...plan.axes.map(({ name, values }) => `  ${name}: ${shortList(values.map(String))}`),
    "",
    runTable(plan, view.showAll),
    "",
    `Order of the night: ${shortList(plan.order.map(numbersOf(plan)))}`,
    ...costLines(plan, view),
    ...warningLines(plan),
    "Nothing was written.",
    "",
  ].join("\n");
}

function countWords(plan: Plan): string {
  const roles = [
    ["sweep", "of the sweep", "of the sweep"],
    ["baseline", "baseline", "baselines"],
    ["single", "single case", "single cases"],
    ["companion", "companion", "companions"],
  ] as const;
  const counts = roles.flatMap(([role, one, several]) => {
    const count = plan.runs.filter((run) => run.role === role).length;
    return count === 0 ? [] : [`${count} ${count === 1 ? one : several}`];
  });
  return `${plan.runs.length} ${plan.runs.length === 1 ? "run" : "runs"} (${counts.join(", ")})`;
}

function shortList(items: readonly string[]): string {
  return items.length > 24
    ? `${items.slice(0, 24).join(", ")}, … ${items.length - 24} more`
    : items.join(", ");
}

/** Numbers of the runs by run id, as they are printed. */
function numbersOf(plan: Plan): (runId: string) => string {
  const numbers = new Map(plan.runs.map((run) => [run.runId, String(run.number)]));
  return (runId) => numbers.get(runId) ?? "";
}

function runTable(plan: Plan, showAll: boolean): string {
  const table = new Table({
    head: ["number", "run id", "label", "role", "compared with", "steps", "predicted"],
    colAligns: ["right", "left", "left", "left", "right", "right", "right"],
    style: { head: [], border: [], compact: true },
    chars: plainLines,
  });
  const shown = showAll ? plan.runs : plan.runs.slice(0, ROWS_SHOWN);
  const numberOf = numbersOf(plan);
  for (const run of shown) table.push(row(run, numberOf));
  const rest = plan.runs.length - shown.length;
  return rest > 0 ? `${table.toString()}\n  … and ${rest} more (--all prints them)` : table.toString();
}

/** Columns apart by blanks, one line under the head: reads well, and pastes well. */
const plainLines = {
  ...{ top: "", "top-mid": "", "top-left": "", "top-right": "" },
  ...{ bottom: "", "bottom-mid": "", "bottom-left": "", "bottom-right": "" },
  ...{ left: "", "left-mid": "", mid: "", "mid-mid": "", right: "", "right-mid": "", middle: " " },
};

function row(run: PlannedRun, numberOf: (runId: string) => string): string[] {
  const other = run.companionOf?.runId ?? run.baselineRunId;
  return [
    String(run.number),
    run.runId,
    run.label,
    run.role,
    other === null ? "" : numberOf(other),
    String(run.longestSteps),
    formatDuration(run.predictedSeconds),
  ];
}

/** Predicted end of the night, if every run goes to its longest. */
export function predictedEnd(plan: Plan, now: Date): Date {
  return new Date(now.getTime() + 1000 * plan.predicted.wallSeconds);
}

function costLines(plan: Plan, { now, workers }: PlanView): string[] {
  const { coreSeconds, wallSeconds } = plan.predicted;
  const workerWords = workers === 1 ? "1 worker" : `${workers} workers`;
  const lines = [
    `Predicted: ${formatDuration(coreSeconds)} of compute, ${formatDuration(wallSeconds)} on ${workerWords}, until ${timeWords(predictedEnd(plan, now))}, if every run goes to its longest; a run whose averages are good enough stops earlier.`,
  ];
  if (plan.deadline === null) return lines;
  const left = secondsUntil(plan.deadline, now);
  const end = new Date(now.getTime() + 1000 * left);
  const late =
    wallSeconds > left
      ? `; it may come ${formatDuration(wallSeconds - left)} too early for the last runs, which are then kept for the next night`
      : "";
  return [...lines, `Deadline: ${timeWords(end)}, in ${formatDuration(left)}${late}.`];
}

function timeWords(time: Date): string {
  const two = (n: number) => String(n).padStart(2, "0");
  return `${time.getFullYear()}-${two(time.getMonth() + 1)}-${two(time.getDate())} ${two(time.getHours())}:${two(time.getMinutes())}`;
}

/** Warnings of the plan and of its runs; a warning that many runs share is printed once. */
function warningLines(plan: Plan): string[] {
  const shared = new Map<string, number[]>();
  for (const run of plan.runs)
    for (const { field, words } of run.warnings) {
      const key = `${field}: ${words}`;
      const numbers = shared.get(key);
      if (numbers === undefined) shared.set(key, [run.number]);
      else numbers.push(run.number);
    }
  const ofRuns = [...shared].map(
    ([words, numbers]) =>
      `warning: ${words} (${numbers.length === plan.runs.length ? "every run" : `run ${shortList(numbers.map(String))}`})`,
  );
  return [...plan.warnings.map((words) => `warning: ${words}`), ...ofRuns];
}
