import { mkdirSync, readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { saveFile } from "../../../../orchestrator/cli/save-file.ts";
import { tempFolder } from "../../../helpers/temp-folder.ts";

const folder = tempFolder();
const save = (name: string, content: Iterable<string> | AsyncIterable<string>, force = false) =>
  saveFile(name, content, { cwd: folder.path, force }).catch((error: unknown) => error);
const leftovers = () => readdirSync(folder.path).filter((name) => name.startsWith("."));

describe("a result written to a file", () => {
  it("holds all pieces in order and leaves nothing else behind", async () => {
    expect(await save("a.csv", ["t,CN\n", "0,1\n"])).toBeUndefined();
    expect(readFileSync(join(folder.path, "a.csv"), "utf8")).toBe("t,CN\n0,1\n");
    expect(leftovers()).toEqual([]);
  });

  it("does not replace a file unless told to", async () => {
    folder.write("b.csv", "mine");
    expect(await save("b.csv", ["new"])).toMatchObject({
      code: "STATE_CONFLICT",
      where: "b.csv",
      fix: expect.stringContaining("--force"),
    });
    expect(readFileSync(join(folder.path, "b.csv"), "utf8")).toBe("mine");
    expect(await save("b.csv", ["new"], true)).toBeUndefined();
    expect(readFileSync(join(folder.path, "b.csv"), "utf8")).toBe("new");
  });

  it("does not replace a file that appears while it is being written", async () => {
    async function* late() {
      yield "new";
      folder.write("c.csv", "theirs");
    }
    expect(await save("c.csv", late())).toMatchObject({ code: "STATE_CONFLICT" });
    expect(readFileSync(join(folder.path, "c.csv"), "utf8")).toBe("theirs");
    expect(leftovers()).toEqual([]);
  });

  it("is not there at all when its content fails half-way", async () => {
    function* broken() {
      yield "half";
      throw new Error("made up");
    }
    expect(await save("d.csv", broken())).toMatchObject({ message: "made up" });
    expect(readdirSync(folder.path)).not.toContain("d.csv");
    expect(leftovers()).toEqual([]);
  });

  it("says what is wrong with the place", async () => {
    mkdirSync(join(folder.path, "sub"));
    expect(await save("gone/x.csv", ["1"])).toMatchObject({
      code: "USAGE",
      message: "cannot write gone/x.csv: its folder does not exist",
    });
    expect(await save("sub", ["1"], true)).toMatchObject({
      code: "USAGE",
      message: "cannot write sub: it is a folder",
    });
    folder.write("e", "");
    expect(await save("e/x.csv", ["1"])).toMatchObject({
      code: "USAGE",
      message: expect.stringContaining("is a file"),
    });
  });
});
