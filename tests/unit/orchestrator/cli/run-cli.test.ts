import { describe, expect, it } from "vitest";
import { commands } from "../../../../orchestrator/cli/commands/index.ts";
import { runInProcess } from "../../../helpers/run-in-process.ts";
import { testIo } from "../../../helpers/test-io.ts";

const names = commands.map((make) => make({ ...testIo(), exitWith: () => {} }).name());

describe("midwatch", () => {
  it("has a command to test", () => {
    expect(names.length).toBeGreaterThan(0);
    expect(new Set(names).size).toBe(names.length);
  });

  it("prints its help on stdout, with every command and the caution", async () => {
    const { status, stdout, stderr } = await runInProcess(["--help"]);
    expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
    for (const name of names) expect(stdout).toMatch(new RegExp(`^  ${name} `, "m"));
    expect(stdout).toContain("not certified design loads");
  });

  it.each(names)("%s --help has an example that begins with the command itself", async (name) => {
    const { status, stdout } = await runInProcess([name, "--help"]);
    expect(status).toBe(0);
    expect(stdout).toContain(`\n  $ midwatch ${name}`);
  });

  it("prints the version of package.json", async () => {
    expect(await runInProcess(["--version"])).toMatchObject({
      status: 0,
      stdout: expect.stringMatching(/^\d+\.\d+\.\d+\n$/),
    });
  });

  it("without a command prints the help on stderr and is wrong use", async () => {
    const { status, stdout, stderr } = await runInProcess([]);
    expect({ status, stdout }).toEqual({ status: 2, stdout: "" });
    expect(stderr).toContain("Usage: midwatch");
  });

  it("names the nearest command", async () => {
    const { status, stdout, stderr } = await runInProcess(["chekc"]);
    expect({ status, stdout }).toEqual({ status: 2, stdout: "" });
    expect(stderr).toContain("unknown command 'chekc'");
    expect(stderr).toContain("Did you mean check?");
  });

  it("names the nearest option", async () => {
    const { status, stderr } = await runInProcess(["check", "x.csv", "--tolerence", "1%"]);
    expect(status).toBe(2);
    expect(stderr).toContain("unknown option '--tolerence'");
    expect(stderr).toContain("Did you mean --tolerance?");
    expect(stderr).not.toContain("    at ");
  });

  it("takes a failure that nobody foresaw for a bug: status 70, stack, how to report", async () => {
    const cwd = 5 as unknown as string;
    const { status, stderr } = await runInProcess(["check", "x.csv"], { cwd });
    expect(status).toBe(70);
    expect(stderr).toContain("fault in midwatch");
    expect(stderr).toContain("TypeError");
    expect(stderr).toMatch(/\n {4}at /);
  });
});
