import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { LegRunner, PlannedRun } from "../../orchestrator/contract/index.ts";
import type { NightEvent } from "../../orchestrator/night/index.ts";
import type { DataFolder } from "../../orchestrator/store/data-folder.ts";
import { campaignPicture } from "../helpers/campaign-picture.ts";
import { childrenOf } from "../helpers/kill-night.ts";
import { tempFolder } from "../helpers/temp-folder.ts";
import { emptyFolders, openQuietly, testPool, wholeNight } from "../helpers/test-night.ts";
import { steady, type TestRun, testPlan } from "../helpers/test-plan.ts";

describe("legs that fail", () => {
  const temp = tempFolder();
  const emptyFolder = emptyFolders(temp.path);
  let folder: DataFolder;
  let runner: LegRunner;
  beforeAll(async () => {
    folder = await openQuietly(await emptyFolder("data"));
    runner = testPool(2, 256);
  });
  afterAll(async () => {
    await runner.close();
    await folder.close();
  });

  it("fail their run with its reason and last words, and the manager goes on", async () => {
    const troubles = ["throw", "exit", "abort", "memory", "non-finite", "kill"] as const;
    const runs: TestRun[] = troubles.map((trouble, n) => ({
      label: trouble,
      inputs: steady(n, { trouble, troubleAt: 150 }),
    }));
    runs.push({ label: "healthy", inputs: steady(9, { noise: 0.01 }) });
    const { summary } = await wholeNight(folder, testPlan({ name: "troubled", runs }), runner);
    expect(summary).toMatchObject({ endedBy: "all-done", done: 7 });
    const { list } = await folder.store.campaignState("troubled");
    const said = Object.fromEntries(list.map((run) => [run.label, `${run.verdict}: ${run.reason}`]));
    expect(said.throw).toMatch(/^failed: .*step 150.*the matrix is singular/);
    expect(said.exit).toMatch(/^failed: .*exit status 3.*licence server lost/s);
    expect(said.abort).toMatch(/^failed: .*SIGABRT/);
    expect(said.memory).toMatch(/^failed: .*memory/);
    expect(said["non-finite"]).toMatch(/^unstable: .*strip 3 is NaN/);
    expect(said.kill).toMatch(/^failed: .*killed by SIGKILL/);
    expect(said.healthy).toMatch(/^accepted/);
    // What was recorded before the failure is kept where the process could still write it.
    const steps = await Promise.all(
      list.slice(0, 5).map(async (run) => (await folder.store.runDetail(run.runId)).attempts[0]!.steps),
    );
    expect([steps[0], steps[4]]).toEqual([149, 149]);
  }, 60_000);

  it("are not computed again when the campaign is launched again or another asks for the same run", async () => {
    const runs = [{ label: "throw", inputs: steady(0, { trouble: "throw", troubleAt: 150 }) }];
    for (const name of ["troubled", "also troubled"]) {
      const { summary } = await wholeNight(folder, testPlan({ name, runs }), runner);
      expect(summary).toMatchObject({ endedBy: "all-done", computeSeconds: 0, verdicts: { failed: 1 } });
    }
  });

  it("are gone within 1 s of a stop even when they do not listen", async () => {
    const runs = [{ label: "spinning", inputs: steady(5, { trouble: "spin", troubleAt: 60, stepMs: 10 }) }];
    let stop = () => {};
    let told = 0;
    const { summary } = await wholeNight(folder, testPlan({ name: "spinning", runs }), runner, {
      onStart: (ask) => {
        stop = ask;
      },
      onEvent: (event) => {
        if (event.kind !== "progress" || told > 0) return;
        told = Number.POSITIVE_INFINITY;
        // By then the process spins in its 60th step.
        setTimeout(() => {
          told = performance.now();
          stop();
        }, 3000);
      },
    });
    expect(performance.now() - told).toBeLessThan(1000);
    expect(summary).toMatchObject({ endedBy: "stopped", done: 0, legs: 0 });
  });
});

describe("legs that are disturbed from outside", () => {
  const temp = tempFolder();
  const emptyFolder = emptyFolders(temp.path);
  let runner: LegRunner;
  const plan = testPlan({
    name: "disturbed",
    tolerance: 0.02,
    runs: [1, 2, 3].map((n) => ({
      label: `run ${n}`,
      // Slow enough for several progress events a run, however fast the machine.
      inputs: steady(60 + n, { stepMs: 3 }),
      longestSteps: 2000,
    })),
  });
  let undisturbed: Awaited<ReturnType<typeof campaignPicture>>;
  beforeAll(async () => {
    runner = testPool();
    const folder = await openQuietly(await emptyFolder("undisturbed"));
    await wholeNight(folder, plan, runner);
    undisturbed = await campaignPicture(folder, "disturbed");
    await folder.close();
  });
  afterAll(() => runner.close());

  /** A night in which `disturb` is called at progress events; its campaign must come out like the undisturbed one. */
  async function disturbedNight(
    name: string,
    disturb: (folder: DataFolder, event: Extract<NightEvent, { kind: "progress" }>) => Promise<boolean>,
  ): Promise<{ disturbances: number; folder: DataFolder }> {
    const folder = await openQuietly(await emptyFolder(name));
    let disturbances = 0;
    const pending: Promise<void>[] = [];
    const { summary } = await wholeNight(folder, plan, runner, {
      legSeconds: 0.3,
      onEvent: (event) => {
        if (event.kind !== "progress" || event.step === 0) return;
        pending.push(
          disturb(folder, event).then((did) => {
            disturbances += did ? 1 : 0;
          }),
        );
      },
    });
    await Promise.all(pending);
    expect(summary.endedBy).toBe("all-done");
    expect(await campaignPicture(folder, "disturbed")).toEqual(undisturbed);
    return { disturbances, folder };
  }

  it("come out the same when their processes are killed", async () => {
    const { disturbances, folder } = await disturbedNight("killed", async (_folder, event) => {
      if (event.worker !== 0) return false;
      const [child] = childrenOf(process.pid).filter((pid) => pid !== lastKilled);
      if (child === undefined || killed >= 4) return false;
      killed += 1;
      lastKilled = child;
      process.kill(child, "SIGKILL");
      return true;
    });
    expect(disturbances).toBeGreaterThanOrEqual(2);
    await folder.close();
  });
  let killed = 0;
  let lastKilled = 0;

  it("come out the same when their tickets are delivered twice", async () => {
    const { disturbances, folder } = await disturbedNight("twice", async (folder, event) => {
      const { legs, attempt } = await folder.store.campaignRun("disturbed", event.run.runId);
      const ticket = { campaign: "disturbed", runId: event.run.runId, attempt, legs, tries: 77 };
      const queue = await folder.legQueue();
      await queue.add([
        { ticket, priority: 1 },
        { ticket: { ...ticket, tries: 78 }, priority: 1 },
      ]);
      return true;
    });
    expect(disturbances).toBeGreaterThanOrEqual(3);
    for (const run of plan.runs) await expectNothingTwice(folder, run);
    await folder.close();
  });

  it("write nothing once somebody else has claimed them, and are computed again", async () => {
    let stolen = 0;
    const { folder } = await disturbedNight("stolen", async (folder, event) => {
      if (stolen >= 3) return false;
      stolen += 1;
      const { legs, attempt } = await folder.store.campaignRun("disturbed", event.run.runId);
      return (await folder.store.claim("disturbed", event.run.runId, attempt, legs)) !== null;
    });
    const details = await Promise.all(plan.runs.map((run) => folder.store.runDetail(run.runId)));
    const legs = details.reduce((sum, detail) => sum + detail.attempts[0]!.legs, 0);
    expect(stolen).toBe(3);
    expect(legs).toBeGreaterThan(3);
    for (const run of plan.runs) await expectNothingTwice(folder, run);
    await folder.close();
  });

  it("come out the same when the queue forgets every ticket", async () => {
    let cleared = 0;
    const { folder } = await disturbedNight("forgotten", async (folder) => {
      if (cleared >= 2) return false;
      cleared += 1;
      await (await folder.legQueue()).clear();
      return true;
    });
    expect(cleared).toBe(2);
    await folder.close();
  });

  async function expectNothingTwice(folder: DataFolder, run: PlannedRun): Promise<void> {
    const pieces = await folder.store.historyPieces(run.runId, 1);
    let next = 1;
    for (const piece of pieces) {
      expect(piece.fromStep).toBe(next);
      next = piece.toStep + 1;
    }
  }
});
