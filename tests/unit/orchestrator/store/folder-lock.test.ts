import { spawn } from "node:child_process";
import { once } from "node:events";
import { readdirSync, readFileSync, statSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { AppError } from "../../../../orchestrator/contract/index.ts";
import { folderHolder, lockFolder } from "../../../../orchestrator/store/folder-lock.ts";
import { processAlive, processStart } from "../../../../orchestrator/store/process-alive.ts";
import {
  readServerFile,
  removeServerFile,
  writeServerFile,
} from "../../../../orchestrator/store/server-file.ts";
import { tempFolder } from "../../../helpers/temp-folder.ts";

function refusalOf(dir: string): AppError {
  try {
    lockFolder(dir)();
  } catch (error) {
    if (error instanceof AppError) return error;
    throw error;
  }
  throw new Error("the folder was taken");
}

describe("the lock of a data folder", () => {
  const folder = tempFolder();
  const dirFor = (name: string) => join(folder.path, name);

  it("refuses a second taker at once, naming the holder and what to do", () => {
    const dir = dirFor("twice");
    const release = lockFolder(dir);
    const before = performance.now();
    const refusal = refusalOf(dir);
    expect(performance.now() - before).toBeLessThan(1000);
    expect(refusal.code).toBe("DATA_FOLDER_BUSY");
    expect(refusal.message).toContain(String(process.pid));
    expect(refusal.fix).toContain("--data");
    expect(folderHolder(dir)).toEqual({ pid: process.pid });
    release();
    expect(folderHolder(dir)).toBeNull();
    lockFolder(dir)();
  });

  it("is taken over from a process that was killed", async () => {
    const dir = dirFor("killed");
    const child = spawn(process.execPath, ["-e", "setInterval(() => {}, 1000)"], { stdio: "ignore" });
    await once(child, "spawn");
    writeHolder(dir, { pid: child.pid!, start: processStart(child.pid!) });
    expect(refusalOf(dir).message).toContain(String(child.pid));
    child.kill("SIGKILL");
    await once(child, "close");
    lockFolder(dir)();
  });

  it("is not fooled by a process number that was given out again", () => {
    const dir = dirFor("reused");
    writeHolder(dir, { pid: process.pid, start: "1" });
    lockFolder(dir)();
  });

  it("never gives a number out again", () => {
    const dir = dirFor("numbers");
    for (let i = 0; i < 5; i++) lockFolder(dir)();
    expect(readdirSync(join(dir, "lock"))).toEqual(["free-000000005"]);
  });

  it("lets one of many processes in, whoever comes at the same moment", async () => {
    const dir = dirFor("crowd");
    const module = new URL("../../../../orchestrator/store/folder-lock.ts", import.meta.url).href;
    const script = `import { lockFolder } from ${JSON.stringify(module)};
      try { lockFolder(${JSON.stringify(dir)}); console.log("in"); setTimeout(() => {}, 2500); } catch (e) { console.log(e.code); }`;
    const answers = await Promise.all(
      Array.from({ length: 4 }, async () => {
        const child = spawn(process.execPath, ["--import", "tsx", "--input-type=module", "-e", script]);
        let text = "";
        child.stdout.on("data", (piece) => {
          text += piece;
        });
        await once(child, "close");
        return text.trim();
      }),
    );
    expect(answers.filter((answer) => answer === "in")).toHaveLength(1);
    expect(answers.filter((answer) => answer === "DATA_FOLDER_BUSY")).toHaveLength(3);
  }, 30_000);
});

describe("whether a process is alive", () => {
  it("knows this one, and its start", () => {
    expect(processAlive(process.pid, processStart(process.pid))).toBe(true);
    expect(processAlive(process.pid, "another start")).toBe(false);
  });
});

describe("the word of the server", () => {
  const folder = tempFolder();

  it("is told to this user only, and only while its process holds the folder", () => {
    const release = lockFolder(folder.path);
    expect(readServerFile(folder.path)).toBeNull();
    const info = { pid: process.pid, port: 4321, token: "0123456789abcdef" };
    writeServerFile(folder.path, info);
    expect(statSync(join(folder.path, "server.json")).mode & 0o777).toBe(0o600);
    expect(readServerFile(folder.path)).toEqual(info);
    writeServerFile(folder.path, { ...info, pid: info.pid + 1 });
    expect(readServerFile(folder.path)).toBeNull();
    writeServerFile(folder.path, info);
    release();
    expect(readServerFile(folder.path)).toBeNull();
    removeServerFile(folder.path);
    expect(readdirSync(folder.path)).toEqual(["lock"]);
  });
});

/** Leaves a lock as another process would. */
function writeHolder(dir: string, holder: { pid: number; start: string | null }): void {
  lockFolder(dir);
  const [name] = readdirSync(join(dir, "lock"));
  const path = join(dir, "lock", name!);
  const { host } = JSON.parse(readFileSync(path, "utf8"));
  writeFileSync(path, JSON.stringify({ ...holder, host, nonce: "n" }));
}
