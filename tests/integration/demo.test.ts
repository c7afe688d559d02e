import { join } from "node:path";
import { parse } from "csv-parse/sync";
import { beforeAll, describe, expect, it } from "vitest";
import { CAUTION } from "../../orchestrator/contract/index.ts";
import { runProcess } from "../helpers/run-process.ts";
import { tempFolder } from "../helpers/temp-folder.ts";

const DEMO = join(import.meta.dirname, "..", "..", "examples", "lantern.yaml");
const folder = tempFolder();
const data = join(folder.path, "night");

type Row = Readonly<Record<string, string>>;
const rowsOf = (csv: string): Row[] => parse(csv, { columns: true });

/** The demo campaign as a user runs it: from the file to the loads, with the real model, nothing else running. */
describe("the demo", () => {
  let launched: Awaited<ReturnType<typeof runProcess>>;
  let loads: Row[];
  let all: Row[];

  beforeAll(async () => {
    launched = await runProcess(["launch", DEMO, "--data", data]);
    const csv = async (...more: string[]) =>
      rowsOf((await runProcess(["loads", "--data", data, "--format", "csv", ...more])).stdout);
    loads = await csv();
    all = await csv("--all");
  }, 900_000);

  it("ends well, with a table, the caution and where the results lie", () => {
    expect(launched.status).toBe(0);
    expect(launched.stdout).toContain(CAUTION);
    expect(launched.stdout).toContain("Every run is done");
    expect(launched.stdout).toContain("midwatch loads");
    expect(launched.stdout).toMatch(/Compute: .+ spent, .+ saved by ending runs early/);
  });

  it("holds accepted, unstable and needs-longer runs", () => {
    const verdicts = new Set(all.map((row) => row.run_verdict));
    expect([...verdicts].sort()).toEqual(expect.arrayContaining(["accepted", "needs-longer", "unstable"]));
    const sweep = all.filter((row) => row.role === "sweep");
    expect(new Set(sweep.map((row) => row.run_verdict))).toEqual(new Set(["accepted"]));
  });

  it("gives a wing alone the normal force that it had in an independent computation", () => {
    // 0.4595: an earlier, separately written program of the same method, 75 rows of wake at every step; measured.
    const wing = loads.find((row) => row.role === "baseline" && row.channel === "CN")!;
    expect(Math.abs(Number(wing.mean) - 0.4595)).toBeLessThan(0.004);
  });

  it("hands out a number for what is accepted only, and marks the rest where all is asked for", () => {
    const refused = loads.filter((row) => row.accepted !== "true");
    expect(refused.length).toBeGreaterThan(0);
    for (const row of refused) {
      expect([row.mean, row.half_width, row.plain_mean]).toEqual(["", "", ""]);
      expect(row.reason).not.toBe("");
    }
    expect(all.every((row) => row.caution === CAUTION)).toBe(true);
  });

  it("flags the wake cut after 27 rows", () => {
    const short = loads.find((row) => row.role === "companion" && row.channel === "CN")!;
    const tested = loads.filter((row) => row.warnings?.includes("depends-on-wake-length"));
    expect(tested.length).toBeGreaterThan(0);
    expect(Number(tested[0]?.wake_length_difference)).toBeCloseTo(
      Number(short.mean) - Number(tested[0]?.mean),
      6,
    );
  });

  it("refuses the late onset for a stated reason, and loses tiny cores within two revolutions", () => {
    const late = all.find((row) => row.label === "meets its own wake" && row.channel === "CN")!;
    expect(late.reason).toMatch(/begins at sample \d+, and what precedes it will not do/);
    const tiny = all.find((row) => row.label === "tiny cores")!;
    expect(tiny.run_verdict).toBe("unstable");
    expect(Number(tiny.steps)).toBeLessThan(36);
  });
});
