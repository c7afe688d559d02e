import { stringify } from "csv-stringify/sync";
import { CAUTION } from "../contract/index.ts";
import type { LoadRow } from "../night/index.ts";

type Cell = string | number | boolean | null;

/** Columns before the varied values, and behind them. Names and order are relied on by scripts: append only. */
const BEFORE: readonly (readonly [name: string, cell: (row: LoadRow) => Cell])[] = [
  ["campaign", (row) => row.campaign],
  ["run", (row) => row.number],
  ["run_id", (row) => row.runId],
  ["label", (row) => row.label],
  ["role", (row) => row.role],
];

const BEHIND: readonly (readonly [name: string, cell: (row: LoadRow) => Cell])[] = [
  ["channel", (row) => row.channel],
  ["unit", (row) => row.unit],
  ["accepted", (row) => row.accepted],
  ["verdict", (row) => row.verdict],
  ["run_verdict", (row) => row.runVerdict],
  ["mean", (row) => row.mean],
  ["half_width", (row) => row.halfWidth],
  ["plain_mean", (row) => row.plainMean],
  ["confidence", (row) => row.confidence],
  ["tolerance", (row) => row.tolerance],
  ["effective_samples", (row) => row.effectiveSamples],
  ["window_from_step", (row) => row.window?.fromStep ?? null],
  ["window_to_step", (row) => row.window?.toStep ?? null],
  ["window_from_time", (row) => row.window?.fromTime ?? null],
  ["window_to_time", (row) => row.window?.toTime ?? null],
  ["wake_length_difference", (row) => sufficiency(row, "wake-length")],
  ["step_difference", (row) => sufficiency(row, "step")],
  ["strips_difference", (row) => sufficiency(row, "strips")],
  ["warnings", (row) => row.warnings.join("; ")],
  ["remedy", (row) => row.remedy?.name ?? null],
  ["remedy_cost", (row) => row.remedy?.cost ?? null],
  ["stop_cause", (row) => row.stopCause],
  ["attempt", (row) => row.attempt],
  ["steps", (row) => row.steps],
  ["reason", (row) => row.reason],
  ["what", (row) => row.what],
  ["caution", () => CAUTION],
];

/**
 * Loads as CSV: one line a run and channel, one column for every varied value, the caution in the last column of every
 * line, so that a plain `read_csv` takes it in and keeps it. Holds nothing that differs between two equal campaigns.
 */
export function loadsCsv(rows: readonly LoadRow[]): string {
  const fixed = new Set([...BEFORE, ...BEHIND].map(([name]) => name));
  const axes = [...new Set(rows.flatMap((row) => Object.keys(row.varied)))];
  const columns = [
    ...BEFORE,
    ...axes.map((axis) => {
      const name = fixed.has(axis) ? `varied_${axis}` : axis;
      return [name, (row: LoadRow): Cell => row.varied[axis] ?? null] as const;
    }),
    ...BEHIND,
  ];
  const header = columns.map(([name]) => name);
  const lines = rows.map((row) => columns.map(([, cell]) => cell(row)));
  return stringify([header, ...lines], { cast: { boolean: String } });
}

/** The largest difference to a companion of this kind, with its sign. */
function sufficiency(
  row: LoadRow,
  aspect: LoadRow["uncertainty"]["sufficiency"][number]["aspect"],
): number | null {
  return row.uncertainty.sufficiency
    .filter((part) => part.aspect === aspect)
    .map((part) => part.difference)
    .reduce<number | null>((most, d) => (most === null || Math.abs(d) > Math.abs(most) ? d : most), null);
}
