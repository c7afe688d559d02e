import { stringify } from "csv-stringify/sync";
import { CAUTION, type ChannelInfo } from "../contract/index.ts";

/** A history ready to be written: one row a time step. */
export interface HistoryTable {
  readonly runId: string;
  readonly attempt: number;
  readonly dtSeconds: number;
  /** Time of every step, s. */
  readonly time: Float64Array;
  readonly channels: readonly { readonly info: ChannelInfo; readonly values: Float64Array }[];
}

/** Rows joined into one piece of text. */
const ROWS_A_PIECE = 2000;

/**
 * A history as CSV: `time`, one column a channel in full precision, and `caution`, which is filled in the first row only,
 * so that the file stays small and a plain `read_csv` still takes it in.
 */
export function* historyCsv(history: HistoryTable): Generator<string> {
  const { time, channels } = history;
  yield stringify([["time", ...channels.map(({ info }) => info.name), "caution"]]);
  const caution = stringify([[CAUTION]]).trimEnd();
  let piece = "";
  for (let i = 0; i < time.length; i++) {
    piece += String(time[i]);
    for (const { values } of channels) piece += `,${numberText(values[i]!)}`;
    piece += i === 0 ? `,${caution}\n` : ",\n";
    if (i % ROWS_A_PIECE !== ROWS_A_PIECE - 1) continue;
    yield piece;
    piece = "";
  }
  yield piece;
}

/** A history as one JSON document; numbers that JSON cannot write are null. */
export function* historyJson(history: HistoryTable): Generator<string> {
  const { time, channels, runId, attempt, dtSeconds } = history;
  yield `{\n"run": ${JSON.stringify(runId)},\n"attempt": ${attempt},\n"dt": ${dtSeconds},\n"caution": ${JSON.stringify(CAUTION)},\n`;
  yield `"time": [`;
  yield* numberList(time);
  yield `],\n"channels": {`;
  for (const [k, { info, values }] of channels.entries()) {
    const { name, unit, what, role } = info;
    yield `${k === 0 ? "\n" : ",\n"}${JSON.stringify(name)}: {"unit": ${JSON.stringify(unit)}, "what": ${JSON.stringify(what)}, "role": ${JSON.stringify(role)}, "values": [`;
    yield* numberList(values);
    yield "]}";
  }
  yield "\n}\n}\n";
}

function* numberList(values: Float64Array): Generator<string> {
  for (let from = 0; from < values.length; from += ROWS_A_PIECE) {
    const part = Array.from(values.subarray(from, from + ROWS_A_PIECE), (x) => JSON.stringify(x));
    yield (from === 0 ? "" : ",") + part.join(",");
  }
}

/** As pandas and midwatch read it. */
function numberText(value: number): string {
  if (Number.isNaN(value)) return "NaN";
  return Number.isFinite(value) ? String(value) : value > 0 ? "inf" : "-inf";
}
