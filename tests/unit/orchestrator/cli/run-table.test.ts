import { describe, expect, it } from "vitest";
import { runTable } from "../../../../orchestrator/cli/run-table.ts";
import { handedOut } from "../../../../orchestrator/exports/handed-out.ts";
import { loadRow, refusedRow } from "../../../helpers/load-rows.ts";

const rows = [
  loadRow(),
  loadRow({ channel: "rotor1.CT", mean: 0.62, halfWidth: 0.011 }),
  refusedRow(),
  refusedRow({ channel: "rotor1.CT", mean: 0.6, halfWidth: 0.2 }),
];

describe("the table of runs", () => {
  it("has one line a run, with varied values, verdict, channels, window and reason", () => {
    expect(runTable(handedOut(rows, false), { width: null }).split("\n")).toEqual([
      "run  tip_speed_ratio  blades  verdict   CN               rotor1.CT      window     remarks",
      "1    3.5              3       accepted  0.4516 ± 0.0027  0.620 ± 0.011  0.6–3.6 s",
      `2    4.5              –       unstable  –                –              –          ${refusedRow().reason}`,
    ]);
  });

  it("puts what is not accepted in parentheses", () => {
    const line = runTable(handedOut(rows, true), { width: null }).split("\n")[2];
    expect(line).toContain("(0.4516 ± 0.0027)  (0.60 ± 0.20)");
  });

  it("wraps the remarks where the terminal is narrow, and nothing else", () => {
    const lines = runTable(handedOut(rows, false), { width: 110 }).split("\n");
    expect(lines.length).toBeGreaterThan(3);
    expect(Math.max(...lines.map((line) => line.length))).toBeLessThanOrEqual(110);
    expect(lines[1]).toContain("0.4516 ± 0.0027");
  });

  it("tells campaigns apart, names windows by channel where they differ, and says which remedy", () => {
    const remedy = { name: "larger core", cost: "blurs tip vortices", set: {} };
    const late = { fromStep: 300, toStep: 720, fromTime: 1.5, toTime: 3.6 };
    const table = runTable(
      [
        loadRow({ remedy, warnings: ["variance-changed"] }),
        loadRow({ channel: "CL", window: late }),
        loadRow({ campaign: "other" }),
      ],
      { width: null },
    );
    expect(table).toMatch(/^campaign {2}run/);
    expect(table).toContain("CN 0.6–3.6 s, CL 1.5–3.6 s");
    expect(table).toContain("remedy larger core: blurs tip vortices; variance-changed");
  });

  it("names the runs that stand beside the sweep", () => {
    const lines = runTable(
      [loadRow(), loadRow({ runId: "b", number: 9, role: "baseline", label: "rotors off" })],
      {
        width: null,
      },
    ).split("\n");
    expect(lines[0]).toMatch(/blades +case +verdict/);
    expect(lines[1]).toMatch(/^1 +3.5 +3 +accepted/);
    expect(lines[2]).toMatch(/^9 .*rotors off +accepted/);
  });

  it("uses the label where nothing was varied, and says what is not done", () => {
    const waiting = loadRow({
      varied: {},
      accepted: false,
      runVerdict: null,
      verdict: null,
      mean: null,
      window: null,
      reason: "waiting",
    });
    expect(runTable([waiting], { width: null }).split("\n")[1]).toMatch(
      /^1 +tip_speed_ratio 3.5 +not done +– +– +waiting$/,
    );
  });
});
