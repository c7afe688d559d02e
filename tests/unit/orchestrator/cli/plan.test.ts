import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import type { Plan } from "../../../../orchestrator/contract/index.ts";
import { campaignText } from "../../../helpers/planned.ts";
import { runInProcess } from "../../../helpers/run-in-process.ts";
import { tempFolder } from "../../../helpers/temp-folder.ts";
import { projectRoot } from "../../../tidy/source-tree.ts";

const folder = tempFolder();
const plan = (...args: string[]) => runInProcess(["plan", ...args], { cwd: folder.path });
const many = (count: number) =>
  `axes:\n  - { field: wing.pitch_deg, range: { from: 0, to: 9, count: ${count} } }\nsufficiency: off`;

describe("midwatch plan", () => {
  it("plans both examples with the model itself, and each run says why it is there", async () => {
    for (const name of ["first-campaign.yaml", "lantern.yaml"]) {
      const { status, stdout, stderr } = await plan(join(projectRoot, "examples", name), "--json");
      expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
      const document = JSON.parse(stdout) as Plan & { predicted: { end: string; workers: number } };
      expect(new Set(document.order)).toEqual(new Set(document.runs.map((run) => run.runId)));
      expect(new Set(document.runs.map((run) => run.role)).size).toBeGreaterThanOrEqual(3);
      expect(document.runs.every((run) => run.predictedSeconds > 0 && run.dtSeconds > 0)).toBe(true);
      const end = Date.parse(document.predicted.end) - Date.parse("2026-03-01T20:00:00Z");
      expect(end / 1000).toBeCloseTo(document.predicted.wallSeconds, 2);
    }
  });

  it("prints the same plan twice, given the speed, and writes nothing at all", async () => {
    folder.write("small.yaml", campaignText(""));
    const before = readdirSync(folder.path);
    const args = ["small.yaml", "--json", "--speed", "1e8"];
    const first = await plan(...args);
    expect(first.status).toBe(0);
    expect((await plan(...args)).stdout).toBe(first.stdout);
    const words = await plan("small.yaml");
    expect(words.stdout).toContain("Small: 2 runs (1 of the sweep, 1 companion)");
    expect(words.stdout).toContain("Nothing was written.");
    expect(readdirSync(folder.path)).toEqual(before);
  });

  it("predicts twice the time at half the speed", async () => {
    folder.write("small.yaml", campaignText(""));
    const seconds = async (speed: string) =>
      (JSON.parse((await plan("small.yaml", "--json", "--speed", speed)).stdout) as Plan).predicted
        .coreSeconds;
    expect((await seconds("1e8")) / (await seconds("2e8"))).toBeCloseTo(2, 10);
  });

  it("refuses bad input with status 2, place and advice on stderr, and nothing on stdout", async () => {
    folder.write("feet.yaml", campaignText("").replace("span_m: 2.4", "span_ft: 8"));
    folder.write(
      "few-strips.yaml",
      campaignText("single_cases: [{ name: coarse, set: { wing.spanwise_panels: 4 } }]"),
    );
    for (const [name, words] of [
      ["nothing.yaml", "where: nothing.yaml"],
      ["feet.yaml", "case.wing.span_ft: there is no such field; give span_m, in m\n  where: feet.yaml:4:11"],
      ["few-strips.yaml", "too few to feel its wake (in coarse)\n  where: few-strips.yaml:9:"],
    ] as const) {
      const { status, stdout, stderr } = await plan(name);
      expect({ status, stdout }).toEqual({ status: 2, stdout: "" });
      expect(stderr).toContain(words);
      expect(stderr).toContain("to do: ");
    }
  });

  it("tells a script how to confirm a very large number of runs, and takes the confirmation", async () => {
    folder.write("million.yaml", campaignText(many(1_000_000)));
    // The number is looked at before names are: with the number confirmed, the next mistake shows.
    folder.write("many.yaml", campaignText(`${many(10_001)}\nbaseline: nothing`));
    expect(await plan("million.yaml", "--yes")).toMatchObject({
      status: 2,
      stdout: "",
      stderr: expect.stringContaining("as many as 1000000 runs; one campaign holds 200000"),
    });
    const asked = await plan("many.yaml");
    expect(asked).toMatchObject({ status: 2, stdout: "" });
    expect(asked.stderr).toContain("as many as 10001 runs");
    expect(asked.stderr).toContain("say so with --yes");
    expect((await plan("many.yaml", "--yes")).stderr).toContain('there is no variant called "nothing"');
  });

  it("is named in the examples that it is tried with", () => {
    const text = readFileSync(join(projectRoot, "examples", "first-campaign.yaml"), "utf8");
    expect(text).toContain("midwatch plan examples/first-campaign.yaml");
  });
});
