import { parse } from "csv-parse/sync";
import { describe, expect, it } from "vitest";
import { CAUTION } from "../../../../orchestrator/contract/index.ts";
import { type HistoryTable, historyCsv, historyJson } from "../../../../orchestrator/exports/history-text.ts";
import { readHistoryFile } from "../../../../orchestrator/histories/read-history-file.ts";
import { tempFolder } from "../../../helpers/temp-folder.ts";

const folder = tempFolder();
const n = 4500;
const history: HistoryTable = {
  runId: "a1b2c3",
  attempt: 2,
  dtSeconds: 0.005,
  time: Float64Array.from({ length: n }, (_, i) => (i + 1) * 0.005),
  channels: ["CN", "rotor1.CT"].map((name, k) => ({
    info: { name, unit: "1", what: `invented channel ${name}`, role: "load" as const },
    values: Float64Array.from({ length: n }, (_, i) => Math.sin(i + k) / 3),
  })),
};
const [cn] = history.channels;

describe("a history as CSV", () => {
  const text = [...historyCsv(history)].join("");

  it("has one line a step, every bit of every number, and the caution once", () => {
    const rows: string[][] = parse(text);
    expect(rows).toHaveLength(n + 1);
    expect(rows[0]).toEqual(["time", "CN", "rotor1.CT", "caution"]);
    expect(rows[1]![3]).toBe(CAUTION);
    expect(new Set(rows.slice(2).map((row) => row[3]))).toEqual(new Set([""]));
    expect(rows.slice(1).map((row) => Number(row[1]))).toEqual([...cn!.values]);
  });

  it("is read back by check as it was written", async () => {
    const back = await readHistoryFile(folder.write("run.csv", text), "run.csv");
    expect(back.channels.map((channel) => channel.name)).toEqual(["CN", "rotor1.CT"]);
    expect(back.time).toEqual(history.time);
    expect(back.channels[1]!.values).toEqual(history.channels[1]!.values);
  });

  it("writes what is not finite so that it is read back", async () => {
    const values = Float64Array.from([Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY]);
    const odd = { ...history, time: Float64Array.from([1, 2, 3]), channels: [{ ...cn!, values }] };
    const file = folder.write("odd.csv", [...historyCsv(odd)].join(""));
    expect((await readHistoryFile(file, "odd.csv")).channels[0]!.values).toEqual(values);
  });
});

describe("a history as JSON", () => {
  it("is one document with units, caution and every number", () => {
    const document = JSON.parse([...historyJson(history)].join(""));
    expect(document).toMatchObject({ run: "a1b2c3", attempt: 2, dt: 0.005, caution: CAUTION });
    expect(document.time).toEqual([...history.time]);
    expect(document.channels.CN).toEqual({
      unit: "1",
      what: "invented channel CN",
      role: "load",
      values: [...cn!.values],
    });
    expect(Object.keys(document.channels)).toEqual(["CN", "rotor1.CT"]);
  });

  it("is valid without rows", () => {
    const none = { ...history, time: new Float64Array(0), channels: [] };
    expect(JSON.parse([...historyJson(none)].join(""))).toMatchObject({ time: [], channels: {} });
  });
});
