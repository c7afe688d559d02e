import { parse } from "csv-parse/sync";
import { describe, expect, it } from "vitest";
import { CAUTION } from "../../../../orchestrator/contract/index.ts";
import { handedOut } from "../../../../orchestrator/exports/handed-out.ts";
import { loadsCsv } from "../../../../orchestrator/exports/loads-csv.ts";
import { loadRow, refusedRow } from "../../../helpers/load-rows.ts";

const read = (text: string): Record<string, string>[] => parse(text, { columns: true });

describe("what is handed out", () => {
  it("keeps accepted loads whole", () => {
    expect(handedOut([loadRow()], false)).toEqual([loadRow()]);
  });

  it("gives the reason and no number of what is not accepted", () => {
    const [row] = handedOut([refusedRow()], false);
    expect(row).toMatchObject({
      accepted: false,
      verdict: "unstable",
      reason: refusedRow().reason,
      mean: null,
      halfWidth: null,
      plainMean: null,
      window: null,
      effectiveSamples: null,
      uncertainty: { statistical: null },
    });
  });

  it("gives the numbers on request, still marked", () => {
    expect(handedOut([refusedRow()], true)).toEqual([refusedRow()]);
  });
});

describe("loads as CSV", () => {
  it("has these columns in this order: scripts rely on them", () => {
    expect(loadsCsv([loadRow()]).split("\n")[0]).toBe(
      "campaign,run,run_id,label,role,tip_speed_ratio,blades,channel,unit,accepted,verdict,run_verdict,mean,half_width," +
        "plain_mean,confidence,tolerance,effective_samples,window_from_step,window_to_step,window_from_time,window_to_time," +
        "wake_length_difference,step_difference,strips_difference,warnings,remedy,remedy_cost,stop_cause,attempt,steps," +
        "reason,what,caution",
    );
  });

  it("carries the caution on every line, and full precision", () => {
    const rows = read(loadsCsv([loadRow({ mean: 0.1 + 0.2 }), refusedRow()]));
    expect(rows.map((row) => row.caution)).toEqual([CAUTION, CAUTION]);
    expect(Number(rows[0]!.mean)).toBe(0.1 + 0.2);
    expect(rows[0]).toMatchObject({
      accepted: "true",
      tip_speed_ratio: "3.5",
      blades: "3",
      window_from_step: "120",
    });
    expect(rows[1]).toMatchObject({ accepted: "false", blades: "", reason: refusedRow().reason });
  });

  it("unites the axes of several campaigns and renames one that is called like a column", () => {
    const other = loadRow({ campaign: "other", varied: { run: "fast", wind_mps: 8 } });
    const rows = read(loadsCsv([loadRow(), other]));
    expect(rows[0]).toMatchObject({ tip_speed_ratio: "3.5", varied_run: "", wind_mps: "" });
    expect(rows[1]).toMatchObject({ tip_speed_ratio: "", varied_run: "fast", wind_mps: "8", run: "1" });
  });

  it("names the largest difference to a companion with its sign", () => {
    const part = (difference: number) => ({
      aspect: "wake-length" as const,
      companionRunId: "c",
      difference,
      exceedsTolerance: false,
    });
    const rows = read(
      loadsCsv([loadRow({ uncertainty: { statistical: 0.1, sufficiency: [part(0.01), part(-0.02)] } })]),
    );
    expect(rows[0]).toMatchObject({ wake_length_difference: "-0.02", step_difference: "" });
  });

  it("has its header even without rows", () => {
    expect(loadsCsv([])).toMatch(/^campaign,run,.*,caution\n$/);
  });
});
