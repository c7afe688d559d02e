import { readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { LegRunner } from "../../orchestrator/contract/index.ts";
import { readHistory } from "../../orchestrator/store/read-history.ts";
import { writeHistoryFile } from "../../workers/history-file.ts";
import { campaignPicture } from "../helpers/campaign-picture.ts";
import { tempFolder } from "../helpers/temp-folder.ts";
import { emptyFolders, openQuietly, testPool, wholeNight } from "../helpers/test-night.ts";
import { steady, testPlan } from "../helpers/test-plan.ts";

const plan = testPlan({
  name: "disk",
  tolerance: 0.02,
  runs: [1, 2, 3].map((n) => ({
    label: `run ${n}`,
    inputs: steady(70 + n, { stepMs: 0.5 }),
    longestSteps: 2000,
  })),
});

describe("damage on the disk", () => {
  const temp = tempFolder();
  const emptyFolder = emptyFolders(temp.path);
  let runner: LegRunner;
  let undisturbed: Awaited<ReturnType<typeof campaignPicture>>;
  beforeAll(async () => {
    runner = testPool();
    const folder = await openQuietly(await emptyFolder("undisturbed"));
    await wholeNight(folder, plan, runner);
    undisturbed = await campaignPicture(folder, "disk");
    await folder.close();
  });
  afterAll(() => runner.close());

  it("of a history sets the run aside, names file and block, finishes the others, and goes on once it is restored", async () => {
    const folder = await openQuietly(await emptyFolder("damaged"));
    let stop = () => {};
    await wholeNight(folder, plan, runner, {
      legSeconds: 0.2,
      onStart: (ask) => {
        stop = ask;
      },
      onEvent: (event) => {
        if (event.kind === "progress" && event.run.number === 3 && event.step > 50) stop();
      },
    });
    const { list } = await folder.store.campaignState("disk");
    const victim = list.find((run) => run.state === "running" && run.steps > 0)!;
    const [piece] = await folder.store.historyPieces(victim.runId, 1);
    const path = join(folder.dir, piece!.file);
    const whole = readFileSync(path);
    const broken = Buffer.from(whole);
    broken[whole.length - 200]! ^= 4;
    writeFileSync(path, broken);

    await expect(readHistory(folder, victim.runId)).rejects.toMatchObject({
      code: "HISTORY_DAMAGED",
      where: `${piece!.file}, block 1`,
    });
    const { summary } = await wholeNight(folder, plan, runner);
    expect(summary).toMatchObject({ endedBy: "damaged", done: 2 });
    expect(summary.trouble?.what).toContain(`${piece!.file}, block 1`);

    writeFileSync(path, whole);
    expect((await wholeNight(folder, plan, runner)).summary.endedBy).toBe("all-done");
    expect(await campaignPicture(folder, "disk")).toEqual(undisturbed);
    await folder.close();
  });

  it("while a history file is written leaves no part of it behind", () => {
    const path = join(temp.path, "half", "x.history");
    const head = { runId: "r", attempt: 1, legId: "l", dtSeconds: 1, channels: ["a"], units: ["1"] };
    const bad = { fromStep: 1, times: new Float64Array(4), columns: [] as Float64Array[] };
    // A column that is missing breaks the writer after the head has been written.
    expect(() => writeHistoryFile(path, head, { ...bad, columns: [undefined as never] })).toThrow();
    expect(readdirSync(join(temp.path, "half"))).toEqual([]);
  });
});
