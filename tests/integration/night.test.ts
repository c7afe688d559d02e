import { readdirSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { LegRunner } from "../../orchestrator/contract/index.ts";
import { campaignLoads, type NightEvent } from "../../orchestrator/night/index.ts";
import type { DataFolder } from "../../orchestrator/store/data-folder.ts";
import { campaignPicture } from "../helpers/campaign-picture.ts";
import { tempFolder } from "../helpers/temp-folder.ts";
import { emptyFolders, openQuietly, testPool, wholeNight } from "../helpers/test-night.ts";
import { steady, type TestRun, testPlan } from "../helpers/test-plan.ts";

describe("a night of small processes", () => {
  const temp = tempFolder();
  const emptyFolder = emptyFolders(temp.path);
  let folder: DataFolder;
  let runner: LegRunner;
  beforeAll(async () => {
    folder = await openQuietly(await emptyFolder("data"));
    runner = testPool();
  });
  afterAll(async () => {
    await runner.close();
    await folder.close();
  });

  const plan = testPlan({
    name: "small",
    tolerance: 0.01,
    runs: [
      { label: "steady", inputs: steady(1) },
      { label: "with a start-up", inputs: steady(2, { startUp: 1, startUpSteps: 30 }) },
      { label: "growing", inputs: steady(3, { phi: 0.9, growFrom: 1500, growth: 0.03 }) },
      { label: "too short", inputs: steady(4, { phi: 0.99 }), longestSteps: 150 },
    ],
  });

  it("goes from a plan to verdicts and loads", async () => {
    const { summary, events } = await wholeNight(folder, plan, runner);
    expect(summary).toMatchObject({ endedBy: "all-done", runs: 4, done: 4, trouble: null });
    expect(summary.savedSeconds).toBeGreaterThan(0);
    const state = await folder.store.campaignState("small");
    expect(state.standing).toBe("done");
    expect(state.list.map((run) => run.verdict)).toEqual([
      "accepted",
      "accepted",
      "unstable",
      "needs-longer",
    ]);
    const loads = campaignLoads(state);
    expect(loads.map((load) => load.accepted)).toEqual([true, true, false, false]);
    for (const load of loads.slice(0, 2)) {
      // The process has this mean by construction; the interval is the tool's own claim about it.
      expect(Math.abs(load.mean! - (1 + load.number / 10))).toBeLessThan(2 * load.halfWidth!);
      expect(load.halfWidth).toBeLessThanOrEqual(0.01);
      expect(load.steps).toBeLessThan(4000);
    }
    const kinds = new Set(events.map((event) => event.kind));
    for (const kind of ["begun", "progress", "tally", "run-done", "idle", "ended"] as const)
      expect(kinds).toContain(kind);
  });

  it("does nothing anew when it is launched again", async () => {
    const before = await campaignPicture(folder, "small");
    const { summary } = await wholeNight(folder, plan, runner);
    expect(summary).toMatchObject({ endedBy: "all-done", legs: 0, computeSeconds: 0, done: 4 });
    expect(await campaignPicture(folder, "small")).toEqual(before);
  });

  it("judges a run that another campaign has computed by its own rules, without computing it again", async () => {
    const runs = [{ label: "steady", inputs: steady(1) }];
    const looser = testPlan({ name: "looser", tolerance: 0.03, runs });
    const { summary } = await wholeNight(folder, looser, runner);
    expect(summary).toMatchObject({ endedBy: "all-done", computeSeconds: 0 });
    const [shared] = await campaignPicture(folder, "looser");
    const [first] = await campaignPicture(folder, "small");
    expect(shared!.steps).toBeLessThan(first!.steps);

    const own = await openQuietly(await emptyFolder("own"));
    await wholeNight(own, looser, runner);
    const [fresh] = await campaignPicture(own, "looser");
    await own.close();
    expect({ ...shared, history: "" }).toEqual({ ...fresh, history: "" });
  });

  it("goes on from the stored history when a campaign asks for more of it", async () => {
    const runs = [{ label: "too short", inputs: steady(4, { phi: 0.99 }), longestSteps: 900 }];
    await wholeNight(folder, testPlan({ name: "small", tolerance: 0.01, runs }), runner);
    const detail = await folder.store.runDetail((await folder.store.campaignState("small")).list[0]!.runId);
    expect(detail.attempts).toMatchObject([{ attempt: 1, steps: 900 }]);
    const pieces = await folder.store.historyPieces(detail.runId, 1);
    expect(pieces.map((piece) => piece.fromStep)).toEqual([1, 151]);
  });

  it("stops within 2 s when told to, keeps what was computed, and goes on to the same numbers", async () => {
    // Slow enough that a progress event comes before any of them is done, however fast the machine.
    const runs: TestRun[] = [
      { label: "a", inputs: steady(11, { stepMs: 3 }) },
      { label: "b", inputs: steady(12, { stepMs: 3 }) },
      { label: "c", inputs: steady(13, { stepMs: 3 }) },
    ];
    const slow = testPlan({ name: "interrupted", tolerance: 0.01, runs });
    let toldMs = 0;
    let stop = () => {};
    const { summary } = await wholeNight(folder, slow, runner, {
      onStart: (ask) => {
        stop = ask;
      },
      onEvent: (event: NightEvent) => {
        if (event.kind !== "progress" || event.step < 100 || toldMs > 0) return;
        toldMs = performance.now();
        stop();
      },
    });
    expect(performance.now() - toldMs).toBeLessThan(2000);
    expect(summary).toMatchObject({ endedBy: "stopped", done: 0 });
    const state = await folder.store.campaignState("interrupted");
    expect(state.standing).toBe("stopped");
    expect(Math.max(...state.list.map((run) => run.steps))).toBeGreaterThanOrEqual(100);
    expect((await wholeNight(folder, slow, runner)).summary.endedBy).toBe("all-done");

    const other = await openQuietly(await emptyFolder("undisturbed"));
    await wholeNight(other, slow, runner);
    expect(await campaignPicture(folder, "interrupted")).toEqual(await campaignPicture(other, "interrupted"));
    await other.close();
  });

  it("ends at the deadline with everything checkpointed", async () => {
    const runs = [{ label: "long", inputs: steady(21, { stepMs: 1, phi: 0.995 }), longestSteps: 100_000 }];
    const deadline = { durationSeconds: 1 };
    const { summary } = await wholeNight(folder, testPlan({ name: "night", runs, deadline }), runner);
    expect(summary).toMatchObject({ endedBy: "deadline", done: 0 });
    expect(summary.endedMs - summary.startedMs).toBeLessThan(3000);
    const { list, standing } = await folder.store.campaignState("night");
    expect(standing).toBe("paused");
    expect(list[0]!.steps).toBeGreaterThan(50);
  });

  it("tries the remedies, keeps every attempt with its reason, and names the remedy with the load", async () => {
    const growing = { growFrom: 300, growth: 0.03 };
    const runs = [{ label: "growing", inputs: steady(31, growing) }];
    const remedies = [
      { name: "slower growth", set: { growth: 0.029 }, cost: "none" },
      { name: "no growth", set: { growth: 0, growFrom: 100_000 }, cost: "leaves the growth out" },
    ];
    await wholeNight(folder, testPlan({ name: "remedied", runs, remedies }), runner);
    const state = await folder.store.campaignState("remedied");
    const [load] = campaignLoads(state);
    expect(load).toMatchObject({ accepted: true, attempt: 3, remedy: remedies[1] });
    const detail = await folder.store.runDetail(load!.runId);
    expect(detail.attempts.map((attempt) => attempt.settings)).toEqual([{}, ...remedies.map((r) => r.set)]);
    expect(detail.campaigns[0]!.past.map((past) => past.verdict)).toEqual(["unstable", "unstable"]);
    for (const past of detail.campaigns[0]!.past) expect(past.reason).not.toBe("");
  });

  it("goes on with the attempts that another campaign has made with the same remedies", async () => {
    const runs = [{ label: "growing", inputs: steady(31, { growFrom: 300, growth: 0.03 }) }];
    const remedies = [
      { name: "called otherwise", set: { growFrom: 100_000, growth: 0 }, cost: "leaves the growth out" },
    ];
    const again = testPlan({ name: "remedied again", runs, remedies });
    const { summary } = await wholeNight(folder, again, runner);
    expect(summary).toMatchObject({ computeSeconds: 0, verdicts: { accepted: 1 } });
    const [load] = campaignLoads(await folder.store.campaignState("remedied again"));
    expect(load).toMatchObject({ accepted: true, attempt: 3, remedy: { name: "called otherwise" } });
  });

  it("shares its legs out: every run gets its first one before any gets its second", async () => {
    const runs = [1, 2, 3, 4].map((n) => ({
      label: `run ${n}`,
      inputs: steady(40 + n, { stepMs: 0.3, phi: 0.99 }),
      longestSteps: 1500,
    }));
    const order: string[] = [];
    await wholeNight(folder, testPlan({ name: "shared", runs, tolerance: 1e-4 }), runner, {
      legSeconds: 0.15,
      onEvent: (event) => {
        if (event.kind === "progress" && order.at(-1) !== event.run.label) order.push(event.run.label);
      },
    });
    expect(new Set(order.slice(0, 4)).size).toBe(4);
    expect(order.length).toBeGreaterThan(8);
  });

  it("refuses a second night in the same folder while one goes on", async () => {
    const runs = [{ label: "long", inputs: steady(51, { stepMs: 1, phi: 0.995 }), longestSteps: 100_000 }];
    const going = testPlan({ name: "going", runs });
    let refused: unknown;
    let asked: Promise<unknown> | null = null;
    let stop = () => {};
    await wholeNight(folder, going, runner, {
      onStart: (ask) => {
        stop = ask;
      },
      onEvent: (event) => {
        if (event.kind !== "progress" || event.step === 0) return;
        asked ??= wholeNight(folder, plan, runner)
          .catch((error: unknown) => {
            refused = error;
          })
          .finally(stop);
      },
    });
    await asked;
    expect(refused).toMatchObject({ code: "STATE_CONFLICT" });
  });

  it("leaves no file behind that the store does not know", async () => {
    const known = await folder.store.files();
    const found = readdirSync(join(folder.dir, "runs"), { withFileTypes: true, recursive: true })
      .filter((entry) => entry.isFile())
      .map((entry) => join(entry.parentPath, entry.name).slice(folder.dir.length + 1));
    expect(found.sort()).toEqual([...known].sort());
  });

  it("takes one leg for each run that is shorter than a leg", async () => {
    const runs = Array.from({ length: 40 }, (_, n) => ({
      label: `tiny ${n}`,
      inputs: steady(100 + n),
      longestSteps: 50,
    }));
    const { summary } = await wholeNight(folder, testPlan({ name: "tiny", runs }), runner);
    expect(summary).toMatchObject({ endedBy: "all-done", legs: 40 });
  });
});
