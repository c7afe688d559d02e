import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { LegRunner } from "../../orchestrator/contract/index.ts";
import { campaignPicture, type RunPicture } from "../helpers/campaign-picture.ts";
import { killNightAt, sleepInNight } from "../helpers/kill-night.ts";
import type { Place } from "../helpers/night-process.ts";
import { tempFolder } from "../helpers/temp-folder.ts";
import { emptyFolders, openQuietly, testPool, wholeNight } from "../helpers/test-night.ts";
import { steady, testPlan } from "../helpers/test-plan.ts";

const plan = testPlan({
  name: "kill",
  tolerance: 0.02,
  remedies: [{ name: "calmer", set: { growth: 0, noise: 0.03 }, cost: "less noise than asked for" }],
  runs: [
    { label: "steady", inputs: steady(1, { stepMs: 1 }), longestSteps: 2000 },
    {
      label: "growing",
      inputs: steady(2, { stepMs: 1, phi: 0.9, growFrom: 500, growth: 0.05 }),
      longestSteps: 1500,
    },
    { label: "short", inputs: steady(3, { stepMs: 1, phi: 0.98 }), longestSteps: 400 },
    {
      label: "spinning up",
      inputs: steady(4, { stepMs: 1, startUp: 2, startUpSteps: 40 }),
      longestSteps: 2000,
    },
  ],
});

describe("a server that is killed with SIGKILL, or", () => {
  const temp = tempFolder();
  const emptyFolder = emptyFolders(temp.path);
  let undisturbed: RunPicture[];
  let runner: LegRunner;
  beforeAll(async () => {
    runner = testPool();
    const folder = await openQuietly(await emptyFolder("undisturbed"));
    const { summary } = await wholeNight(folder, plan, runner);
    expect(summary.endedBy).toBe("all-done");
    undisturbed = await campaignPicture(folder, "kill");
    await folder.close();
    expect(undisturbed.map((run) => run.verdict)).toContain("accepted");
    expect(undisturbed.find((run) => run.label === "growing")?.attempt).toBe(2);
  }, 180_000);
  afterAll(() => runner.close());

  const kills: [place: Place, time: number][] = [
    ["opening", 1],
    ["open", 1],
    ["begun", 1],
    ["in-leg", 2],
    ["before-commit", 1],
    ["before-commit", 5],
    ["after-commit", 1],
    ["after-commit", 7],
  ];
  it.each(kills)(
    "at %s, time %i: goes on to the same numbers, bit for bit",
    async (place, time) => {
      const dir = await emptyFolder(`${place}-${time}`);
      const options = { dir, plan, legSeconds: 0.1, workers: 2 };
      const { orphanMs } = await killNightAt({ ...options, holdAt: { place, time } });
      expect(orphanMs).toBeLessThan(2000);
      const folder = await openQuietly(dir);
      const { summary } = await wholeNight(folder, plan, runner, { legSeconds: 0.13 });
      expect(summary.endedBy).toBe("all-done");
      expect(await campaignPicture(folder, "kill")).toEqual(undisturbed);
      await folder.close();
    },
    180_000,
  );

  it("that sleeps for longer than its locks in the queue last: comes to the same numbers", async () => {
    const dir = await emptyFolder("asleep");
    // Locks last 10 s.
    const summary = await sleepInNight({ dir, plan, legSeconds: 0.1, workers: 2, holdAt: null }, 12_500);
    expect(summary).toMatchObject({ endedBy: "all-done", done: 4 });
    const folder = await openQuietly(dir);
    expect(await campaignPicture(folder, "kill")).toEqual(undisturbed);
    await folder.close();
  }, 180_000);

  it("while the folder is made for the first time: it is made anew", async () => {
    const dir = join(temp.path, "never-whole");
    await killNightAt({
      dir,
      plan,
      legSeconds: 1,
      workers: 1,
      holdAt: { place: "opening", time: 2 },
    });
    const folder = await openQuietly(dir);
    expect(await folder.store.campaigns()).toEqual([]);
    await folder.close();
  });
});
