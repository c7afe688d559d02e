import { once } from "node:events";
import { describe, expect, it } from "vitest";
import { CAUTION } from "../../orchestrator/contract/index.ts";
import { runProcess, startProcess } from "../helpers/run-process.ts";
import { tempFolder } from "../helpers/temp-folder.ts";

const folder = tempFolder();
const constant = folder.write(
  "constant.csv",
  table((_) => 0.45),
);
const rising = folder.write(
  "rising.csv",
  table((i) => 0.001 * i),
);
const broken = folder.write("broken.csv", "t,CN\n0,1\n1,oops\n");

function table(value: (i: number) => number): string {
  return `t,CN\n${Array.from({ length: 2000 }, (_, i) => `${i},${value(i)}`).join("\n")}\n`;
}

describe("the program as a process", () => {
  it("ends with 0 and a whole document when every channel is accepted", async () => {
    const { status, stdout, stderr } = await runProcess(["check", constant, "--json"]);
    expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
    expect(JSON.parse(stdout)).toMatchObject({
      files: [
        {
          file: constant,
          samples: 2000,
          channels: { CN: { verdict: "accepted", mean: 0.45, halfWidth: 0 } },
        },
      ],
      caution: CAUTION,
    });
  });

  it("ends with 1 when one is not", async () => {
    const { status, stdout } = await runProcess(["check", constant, rising, "--tolerance", "1%"]);
    expect(status).toBe(1);
    expect(stdout).toContain("1 of 2 channels in 2 files accepted.");
    expect(stdout).toContain(CAUTION);
  });

  it("ends with 2, prints no document and names file, line and column when one cannot be read", async () => {
    const { status, stdout, stderr } = await runProcess(["check", constant, broken, "--json"]);
    expect({ status, stdout }).toEqual({ status: 2, stdout: "" });
    expect(stderr).toContain(`where: ${broken}:3:2 (column 2, "CN")`);
    expect(stderr).not.toMatch(/\n {4}at /);
  });

  it("ends with 2 on wrong use", async () => {
    expect((await runProcess(["chekc"])).status).toBe(2);
  });

  it("keeps its answer as status, and quiet, when its reader goes away", async () => {
    const child = startProcess(["check", ...Array.from({ length: 60 }, () => rising), "--json"]);
    let stderr = "";
    child.stderr.setEncoding("utf8").on("data", (text: string) => {
      stderr += text;
    });
    child.stdout.destroy();
    const [status] = await once(child, "close");
    expect({ status, stderr }).toEqual({ status: 1, stderr: "" });
  });
});
