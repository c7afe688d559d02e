import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { readCampaign } from "../../../../orchestrator/planning/index.ts";
import { campaignText } from "../../../helpers/planned.ts";
import { tempFolder } from "../../../helpers/temp-folder.ts";

const { path: folder, write: written } = tempFolder();

describe("readCampaign", () => {
  it("reads UTF-8, with or without a byte-order mark, and with Windows line ends", async () => {
    const plain = await readCampaign(written("plain.yaml", campaignText("notes: Größe µ")));
    const marked = await readCampaign(written("marked.yaml", `\uFEFF${campaignText("notes: Größe µ")}`));
    const windows = await readCampaign(
      written("crlf.yaml", campaignText("notes: Größe µ").replaceAll("\n", "\r\n")),
    );
    expect(plain.file.notes).toBe("Größe µ");
    expect(marked.file).toEqual(plain.file);
    expect(windows.file).toEqual(plain.file);
    expect(marked.placeOf(["campaign"])).toEqual({ line: 1, column: 1 });
  });

  it("takes JSON", async () => {
    const { file } = await readCampaign(written("plain.yaml", campaignText("")));
    const json = await readCampaign(written("same.json", JSON.stringify(file)));
    expect(json.file).toEqual(file);
  });

  it.each([
    [
      "a file that is not there",
      () => join(folder, "nothing.yaml"),
      "FILE_NOT_FOUND",
      "there is no such file",
    ],
    ["a folder", () => folder, "FILE_UNREADABLE", "this is a folder"],
    [
      "a path through a file",
      () => join(written("x.yaml", "a: 1"), "y.yaml"),
      "FILE_NOT_FOUND",
      "no such file",
    ],
    ["an empty file", () => written("empty.yaml", ""), "CAMPAIGN_EMPTY", "the file holds nothing"],
    [
      "bytes that are no UTF-8",
      () => written("bytes.yaml", Uint8Array.of(0x61, 0x3a, 0x20, 0xe9, 0x0a)),
      "FILE_UNREADABLE",
      "not text in UTF-8",
    ],
    [
      "UTF-16",
      () => written("wide.yaml", Buffer.from("\uFEFFa: 1", "utf16le")),
      "FILE_UNREADABLE",
      "it looks like UTF-16",
    ],
    [
      "a tab",
      () => written("tab.yaml", "case:\n\twing: 1\n"),
      "YAML_SYNTAX",
      "a tab stands where only spaces may indent",
    ],
    [
      "a huge file",
      () => written("huge.yaml", Buffer.alloc(5 << 20, 32)),
      "TOO_LARGE",
      "the file has 5242880 bytes",
    ],
    [
      "a large text",
      () => written("large.yaml", " ".repeat(2 << 20)),
      "TOO_LARGE",
      "a campaign file may have 1048576",
    ],
  ])("refuses %s", async (_, path, code, words) => {
    await expect(readCampaign(path())).rejects.toMatchObject({
      code,
      message: expect.stringContaining(words),
      where: expect.stringContaining(folder),
      fix: expect.stringMatching(/\S/),
    });
  });
});
