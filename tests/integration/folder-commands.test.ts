import { existsSync, readFileSync, statSync } from "node:fs";
import { join } from "node:path";
import { parse } from "csv-parse/sync";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createApp, folderAnswers, type LiveNight, type Serving, serveApp } from "../../api/http/index.ts";
import { CAUTION } from "../../orchestrator/contract/index.ts";
import type { DataFolder } from "../../orchestrator/store/data-folder.ts";
import { openDataFolder } from "../../orchestrator/store/open-data-folder.ts";
import { removeServerFile, writeServerFile } from "../../orchestrator/store/server-file.ts";
import { filledHistory, fillFolder } from "../helpers/filled-folder.ts";
import { type Outcome, runInProcess } from "../helpers/run-in-process.ts";
import { tempFolder } from "../helpers/temp-folder.ts";
import { steady, testPlan } from "../helpers/test-plan.ts";

const files = tempFolder();
const data = join(files.path, "data");
const plan = testPlan({
  name: "invented",
  runs: [
    { label: "calm", inputs: steady(1) },
    { label: "wild", inputs: steady(2) },
    { label: "later", inputs: steady(3) },
  ],
});
const [calm, wild] = plan.runs.map((run) => run.runId);
const token = "0123456789abcdef0123456789abcdef";
const night: LiveNight = {
  campaign: "invented",
  runs: 3,
  done: 2,
  verdicts: { accepted: 1, unstable: 1 },
  deadlineMs: null,
  predictedEndMs: null,
  workers: [null],
};

const open = () => openDataFolder(data, { onNotice: () => {}, now: () => 0 });
const run = (...args: string[]): Promise<Outcome> =>
  runInProcess([...args, "--data", data], { cwd: files.path });
const answerOf = async (...args: string[]): Promise<string> => {
  const { status, stdout, stderr } = await run(...args);
  expect({ status, stderr: stderr.replace(/^.*data folder.*\n/gm, "") }).toEqual({ status: 0, stderr: "" });
  return stdout;
};

const questions: string[][] = [
  ["loads"],
  ["loads", "invented", "--all"],
  ["loads", "invented", "--format", "csv"],
  ["loads", "invented", "--json"],
  ["history", calm!],
  ["history", calm!.slice(0, 8), "--channel", "monitor", "--json", "--attempt", "1"],
];
const direct = new Map<string, string>();

beforeAll(async () => {
  const folder = await open();
  await fillFolder(folder, plan);
  await folder.close();
});

describe("a folder that nobody holds", () => {
  it("answers, and is free again afterwards", async () => {
    for (const question of questions) direct.set(question.join(" "), await answerOf(...question));
  });

  it("tells of its campaigns and of one", async () => {
    const all = await answerOf("tell");
    expect(all).toMatch(/^invented +ready +2 of 3 +1 accepted, 1 unstable +4 s /m);
    const one = await answerOf("tell", "invented");
    expect(one).toContain("invented (Campaign invented): ready, 2 of 3 runs done, 4 s of compute");
    expect(one).toMatch(
      new RegExp(`^1 +${calm!.slice(0, 12)} +calm +done +accepted +500 of 4000 +every demanded`, "m"),
    );
    expect(one).toMatch(/^3 +\w+ +later +waiting +– +0 of 4000$/m);
    const document = JSON.parse(await answerOf("tell", "invented", "--json"));
    expect(document).toMatchObject({
      campaign: "invented",
      done: 2,
      night: null,
      list: [{ verdict: "accepted" }, {}, {}],
    });
    expect(JSON.stringify(document)).not.toContain("0.4501");
  });

  it("gives numbers only of what is accepted, and the caution with them", () => {
    const table = direct.get("loads")!;
    expect(table).toMatch(/^1 +calm +accepted +0.4501 ± 0.0023 +1.01–5 s$/m);
    expect(table).toMatch(/^2 +wild +unstable +– +– +unstable from step 310 on, too soon for an average$/m);
    expect(table).toMatch(/^3 +later +not done +– +– +not begun yet$/m);
    expect(table).toContain(CAUTION);
    const all = direct.get("loads invented --all")!;
    expect(all).toMatch(/^2 +wild +unstable +\(0.4501 ± 0.0023\)/m);
    expect(all).toContain("In parentheses: not accepted");
    const rows: Record<string, string>[] = parse(direct.get("loads invented --format csv")!, {
      columns: true,
    });
    expect(rows.map((row) => [row.run_id, row.mean, row.accepted])).toEqual([
      [calm, "0.4501", "true"],
      [wild, "", "false"],
      [plan.runs[2]!.runId, "", "false"],
    ]);
    expect(JSON.parse(direct.get("loads invented --json")!)).toMatchObject({
      loads: [{ mean: 0.4501 }, { mean: null, reason: expect.stringContaining("step 310") }, { mean: null }],
      caution: CAUTION,
    });
  });

  it("gives histories to the last bit", () => {
    const rows: string[][] = parse(direct.get(`history ${calm}`)!, { from: 2 });
    expect(rows.map((row) => Number(row[1]))).toEqual([...filledHistory.load]);
    expect(rows.map((row) => Number(row[0]))).toEqual([...filledHistory.times]);
  });

  it("writes to files, and replaces none unless told to", async () => {
    await answerOf("history", calm!, "--out", "run.csv");
    expect(readFileSync(join(files.path, "run.csv"), "utf8")).toBe(direct.get(`history ${calm}`));
    const again = await run("history", calm!, "--out", "run.csv");
    expect(again.status).toBe(2);
    expect(again.stderr).toContain("run.csv is there already");
    await answerOf("loads", "--format", "csv", "--out", "run.csv", "--force");
    expect(readFileSync(join(files.path, "run.csv"), "utf8")).toMatch(/^campaign,run,/);
  });

  it.each([
    [["tell", "inventde"], "there is no campaign", "invented"],
    [["loads", "inventde"], "there is no campaign", "invented"],
    [["stop", "inventde"], "there is no campaign", "invented"],
    [["history", "zzzz"], "zzzz", "tell"],
  ])("%j says that there is no such thing, and what there is", async (args, what, fix) => {
    const { status, stdout, stderr } = await run(...args);
    expect({ status, stdout }).toEqual({ status: 2, stdout: "" });
    expect(stderr).toContain(what);
    expect(stderr).toMatch(new RegExp(`to do: .*${fix}`));
  });

  it("names the nearest channel and the attempts there are", async () => {
    expect((await run("history", calm!, "--channel", "laod")).stderr).toContain("Did you mean load?");
    expect((await run("history", calm!, "--attempt", "7")).stderr).toContain("attempt 1 only");
  });
});

describe("a folder that a process holds", () => {
  let folder: DataFolder;
  let serving: Serving;
  beforeAll(async () => {
    folder = await open();
    const app = createApp({ answers: folderAnswers(folder, () => night), token, onBug: () => {} });
    serving = await serveApp(app, { host: "127.0.0.1", port: 0 });
    writeServerFile(folder.dir, { pid: process.pid, port: serving.port, token });
  });
  afterAll(async () => {
    removeServerFile(folder.dir);
    await serving.close();
    await folder.close();
  });

  it("keeps its token to its owner", () => {
    expect(statSync(join(data, "server.json")).mode & 0o077).toBe(0);
  });

  it.each(questions)("answers %s %s %s as the folder itself does", async (...question) => {
    const words = question.filter((word) => word !== undefined);
    expect(await answerOf(...words)).toBe(direct.get(words.join(" ")));
  });

  it("tells what is going on", async () => {
    const text = await answerOf("tell", "invented");
    expect(text).toContain("Going on now, invented: 2 of 3 runs done (1 accepted, 1 unstable)");
    expect(text).toContain("worker 1: idle");
  });

  it("stops a campaign", async () => {
    expect(await answerOf("stop", "invented")).toContain("invented is stopped");
    expect((await folder.store.campaignState("invented")).standing).toBe("stopped");
  });

  it("is busy for a process that cannot reach the holder", async () => {
    removeServerFile(folder.dir);
    const { status, stderr } = await run("tell");
    expect(status).toBe(2);
    expect(stderr).toContain("code:  DATA_FOLDER_BUSY");
    expect(stderr).toContain(`process ${process.pid}`);
  });
});

describe("removal", () => {
  it("asks first, and takes silence for a no", async () => {
    const { status, stderr } = await run("remove", "invented");
    expect(status).toBe(2);
    expect(stderr).toContain("not confirmed; nothing was removed");
    expect(await answerOf("tell")).toContain("invented");
  });

  it("takes with it what only this campaign asked for, and leaves what others ask for too", async () => {
    const folder = await open();
    const other = testPlan({ name: "other", runs: [{ label: "calm", inputs: steady(1) }] });
    await folder.store.register(other, 0);
    await folder.close();
    const answer = JSON.parse(await answerOf("remove", "invented", "--yes", "--json"));
    expect(answer).toEqual({ campaign: "invented", runsDeleted: 2, runsKept: 1 });
    expect(await answerOf("history", calm!)).toBe(direct.get(`history ${calm}`));
    expect((await run("history", wild!)).stderr).toContain("NOT_FOUND");
    expect(existsSync(join(data, "runs", wild!, "1.1"))).toBe(false);
    expect(existsSync(join(data, "runs", calm!, "1.1"))).toBe(true);
    expect(await answerOf("tell")).not.toContain("invented");
    expect(await answerOf("remove", "other", "--yes")).toContain("other is removed, with 1 run");
    expect(existsSync(join(data, "runs", calm!, "1.1"))).toBe(false);
    expect(await answerOf("tell")).toContain("No campaign has been launched");
  });
});

it("does not make a data folder to look into", async () => {
  const { status, stderr } = await runInProcess(["tell"], {
    cwd: files.path,
    env: { MIDWATCH_DATA: "nowhere" },
  });
  expect(status).toBe(2);
  expect(stderr).toContain("there is no data folder nowhere");
});
