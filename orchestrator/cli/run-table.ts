import Table from "cli-table3";
import type { LoadRow } from "../night/index.ts";
import { formatInterval, sixDigits } from "./format-value.ts";

/** How a table is drawn. */
export interface TableStyle {
  /** Width of the terminal in characters; null where lines may be as long as they like. */
  readonly width: number | null;
}

/**
 * Loads as a table for readers, one line a run: varied values, verdict, every channel with its half-width, window, and
 * why not. A value in parentheses is not accepted.
 */
export function runTable(rows: readonly LoadRow[], style: TableStyle): string {
  const runs = byRun(rows);
  const several = new Set(rows.map((row) => row.campaign)).size > 1;
  const axes = [...new Set(rows.flatMap((row) => Object.keys(row.varied)))];
  const channels = [...new Set(rows.map((row) => row.channel))];
  // Beside a sweep stand runs that its axes do not name: baselines, companions, single cases.
  const named = axes.length > 0 && rows.some((row) => row.role !== "sweep");
  const head = [
    ...(several ? ["campaign"] : []),
    "run",
    ...(axes.length > 0 ? axes : ["label"]),
    ...(named ? ["case"] : []),
    "verdict",
    ...channels,
    "window",
    "remarks",
  ];
  const body = runs.map((run) => {
    const first = run[0]!;
    const varied = axes.map((axis) => variedText(first.varied[axis]));
    return [
      ...(several ? [first.campaign] : []),
      String(first.number),
      ...(axes.length > 0 ? varied : [first.label]),
      ...(named ? [first.role === "sweep" ? "" : first.label] : []),
      first.runVerdict ?? "not done",
      ...channels.map((name) => valueText(run.find((row) => row.channel === name))),
      windowText(run),
      remarks(run),
    ];
  });
  return drawTable(head, body, style);
}

/** A table without frames; where it is too wide for the terminal, its last column wraps. */
export function drawTable(
  head: readonly string[],
  body: readonly (readonly string[])[],
  style: TableStyle,
): string {
  const widths = head.map((name, k) => Math.max(name.length, ...body.map((cells) => cells[k]!.length)) + GAP);
  const last = widths.length - 1;
  const before = widths.slice(0, last).reduce((sum, w) => sum + w, 0);
  const room = style.width === null ? Number.POSITIVE_INFINITY : Math.max(style.width - before, LAST_MIN);
  const colWidths = widths.with(last, Math.min(widths[last]!, room));
  const table = new Table({
    head: [...head],
    colWidths,
    wordWrap: true,
    style: { head: [], border: [], "padding-left": 0, "padding-right": GAP },
    chars: FRAMELESS,
  });
  table.push(...body.map((cells) => [...cells]));
  return table
    .toString()
    .split("\n")
    .map((line) => line.trimEnd())
    .join("\n");
}

const GAP = 2;
/** Narrowest that the last column gets, whatever the terminal. */
const LAST_MIN = 24;

const NO_FRAME = [
  ...["top", "top-mid", "top-left", "top-right", "bottom", "bottom-mid", "bottom-left", "bottom-right"],
  ...["left", "left-mid", "mid", "mid-mid", "right", "right-mid", "middle"],
];
const FRAMELESS = Object.fromEntries(NO_FRAME.map((part) => [part, ""]));

function byRun(rows: readonly LoadRow[]): LoadRow[][] {
  const runs = new Map<string, LoadRow[]>();
  for (const row of rows) {
    const key = `${row.campaign}/${row.runId}`;
    const run = runs.get(key);
    if (run === undefined) runs.set(key, [row]);
    else run.push(row);
  }
  return [...runs.values()];
}

function variedText(value: string | number | boolean | null | undefined): string {
  if (value === null || value === undefined) return "–";
  return typeof value === "number" ? sixDigits(value) : String(value);
}

function valueText(row: LoadRow | undefined): string {
  if (row === undefined || row.mean === null) return "–";
  const text = formatInterval(row.mean, row.halfWidth);
  return row.accepted ? text : `(${text})`;
}

function windowText(run: readonly LoadRow[]): string {
  const windows = run.flatMap(({ channel, window }) =>
    window === null
      ? []
      : [{ channel, text: `${fourDigits(window.fromTime)}–${fourDigits(window.toTime)} s` }],
  );
  const texts = new Set(windows.map(({ text }) => text));
  if (texts.size <= 1) return windows[0]?.text ?? "–";
  return windows.map(({ channel, text }) => `${channel} ${text}`).join(", ");
}

/** Enough to find a window in a plot; exports have all digits. */
const fourDigits = (seconds: number): string => sixDigits(Number(seconds.toPrecision(4)));

function remarks(run: readonly LoadRow[]): string {
  const first = run[0]!;
  return [
    ...(run.every((row) => row.accepted)
      ? []
      : [...new Set(run.filter((row) => !row.accepted).map((row) => row.reason))]),
    ...(first.remedy === null ? [] : [`remedy ${first.remedy.name}: ${first.remedy.cost}`]),
    ...new Set(run.flatMap((row) => row.warnings)),
  ].join("; ");
}
