import { execFileSync } from "node:child_process";
import { mkdirSync, rmSync, statfsSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { LegRunner } from "../../orchestrator/contract/index.ts";
import { isDiskFull } from "../../orchestrator/store/disk-full.ts";
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
const temp = tempFolder();
const emptyFolder = emptyFolders(temp.path);

describe("a disk that is nearly full", () => {
  it("pauses the night before a leg is begun", async () => {
    const runner = testPool();
    const folder = await openQuietly(await emptyFolder("nearly"));
    const { summary } = await wholeNight(folder, plan, runner, { reserveBytes: 2 ** 60 });
    expect(summary).toMatchObject({ endedBy: "disk-full", legs: 0 });
    expect((await folder.store.campaignState("disk")).standing).toBe("paused");
    await folder.close();
    await runner.close();
  });

  it("is recognised by the words of the system and of the database, however deep", () => {
    const system = Object.assign(new Error("write"), { code: "ENOSPC" });
    expect(isDiskFull(system)).toBe(true);
    expect(isDiskFull(new Error("commit failed", { cause: system }))).toBe(true);
    expect(isDiskFull(Object.assign(new Error("x"), { code: "53100" }))).toBe(true);
    expect(isDiskFull(new Error("could not write to file: No space left on device"))).toBe(true);
    expect(isDiskFull(new Error("no such file"))).toBe(false);
    expect(isDiskFull("ENOSPC")).toBe(false);
  });
});

// A disk of a size of our own takes the right to mount one, which root has.
describe.runIf(canMount(temp.path))("a small disk that fills up", () => {
  const mounted = join(temp.path, "small");
  let runner: LegRunner;
  let undisturbed: Awaited<ReturnType<typeof campaignPicture>>;
  beforeAll(async () => {
    runner = testPool();
    const folder = await openQuietly(await emptyFolder("undisturbed"));
    await wholeNight(folder, plan, runner);
    undisturbed = await campaignPicture(folder, "disk");
    await folder.close();
    mkdirSync(mounted);
    execFileSync("mount", ["-t", "tmpfs", "-o", "size=160m", "tmpfs", mounted]);
  });
  afterAll(async () => {
    await runner.close();
    execFileSync("umount", [mounted]);
  });
  const ballast = join(mounted, "ballast");
  /** Leaves this many bytes free. */
  const fill = (free: number): void => {
    rmSync(ballast, { force: true });
    const disk = statfsSync(mounted);
    writeFileSync(ballast, Buffer.alloc(disk.bavail * disk.bsize - free));
  };

  it("pauses the night before anything is half-written, and goes on when there is room again", async () => {
    const dir = join(mounted, "data");
    const folder = await openQuietly(dir);
    const { summary } = await wholeNight(folder, plan, runner, {
      legSeconds: 0.2,
      onEvent: (event) => {
        if (event.kind === "progress" && event.run.number === 3 && event.step === 0) fill(10 * 2 ** 20);
      },
    });
    expect(summary).toMatchObject({ endedBy: "disk-full" });
    expect(summary.trouble?.fix).toContain("--data");
    await folder.close();
    await expect(openQuietly(dir)).rejects.toMatchObject({ code: "DISK_FULL" });
    rmSync(ballast);
    await finish(dir);
  });

  it("to the last byte: a leg that cannot be written is forgotten, and nothing that was acknowledged is lost", async () => {
    const dir = join(mounted, "data-2");
    rmSync(join(mounted, "data"), { recursive: true, force: true });
    const folder = await openQuietly(dir);
    const { summary } = await wholeNight(folder, plan, runner, {
      legSeconds: 0.2,
      reserveBytes: 0,
      onEvent: (event) => {
        if (event.kind === "progress" && event.run.number === 3 && event.step === 0) fill(0);
      },
    });
    expect(summary).toMatchObject({ endedBy: "disk-full" });
    await folder.close();
    rmSync(ballast);
    await finish(dir);
  });

  async function finish(dir: string): Promise<void> {
    const folder = await openQuietly(dir);
    expect((await wholeNight(folder, plan, runner)).summary.endedBy).toBe("all-done");
    expect(await campaignPicture(folder, "disk")).toEqual(undisturbed);
    await folder.close();
  }
});

function canMount(dir: string): boolean {
  const probe = join(dir, "probe");
  mkdirSync(probe, { recursive: true });
  try {
    execFileSync("mount", ["-t", "tmpfs", "-o", "size=1m", "tmpfs", probe], { stdio: "ignore" });
    execFileSync("umount", [probe]);
    return true;
  } catch {
    return false;
  }
}
