import { readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { readCheckpointFile, writeCheckpointFile } from "../../../workers/checkpoint-file.ts";
import { GrowingRecord } from "../../../workers/growing-record.ts";
import { readHistoryPieces, writeHistoryFile } from "../../../workers/history-file.ts";
import { LastLines } from "../../../workers/last-lines.ts";
import { tempFolder } from "../../helpers/temp-folder.ts";

const head = {
  runId: "r",
  attempt: 1,
  legId: "r.1.1",
  dtSeconds: 0.5,
  channels: ["a", "b"],
  units: ["1", "N"],
};

/** Samples whose values tell their step: a is the step, b its negative. */
function counted(from: number, to: number): GrowingRecord {
  const record = new GrowingRecord(2);
  for (let step = from; step <= to; step++) record.push(step / 2, Float64Array.of(step, -step));
  return record;
}

describe("files of a leg", () => {
  const temp = tempFolder();

  it("give a long history back in its pieces, whatever the size of blocks", () => {
    const bytes = writeHistoryFile(join(temp.path, "runs", "one"), head, counted(1, 2500).view(0, 2500));
    expect(bytes).toBe(readFileSync(join(temp.path, "runs", "one")).length);
    writeHistoryFile(join(temp.path, "runs", "two"), head, {
      ...counted(2501, 2510).view(0, 10),
      fromStep: 2501,
    });
    const record = new GrowingRecord(2);
    const pieces = [
      { file: "runs/one", fromStep: 1, toStep: 2500 },
      { file: "runs/two", fromStep: 2501, toStep: 2510 },
    ];
    for (const piece of readHistoryPieces(temp.path, pieces, head.channels)) record.append(piece);
    const { times, columns } = record.view(0, record.length);
    expect(times.length).toBe(2510);
    expect([columns[0]![2500], columns[1]![2509], times[9]]).toEqual([2501, -2510, 5]);
    for (const [wrong, words] of [
      [pieces.slice(1), "begins at step 2501"],
      [[pieces[0]!, pieces[0]!], "begins at step 1"],
      [[{ ...pieces[0]!, toStep: 2400 }], "holds 2500 samples"],
      [[{ ...pieces[0]!, file: "runs/none" }], "cannot be read"],
    ] as const)
      expect(() => readHistoryPieces(temp.path, wrong, head.channels)).toThrow(words);
    expect(() => readHistoryPieces(temp.path, pieces, ["a", "c"])).toThrow("channels");
  });

  it("never overwrite a file that is there", () => {
    writeHistoryFile(join(temp.path, "mine"), head, counted(1, 3).view(0, 3));
    const before = readFileSync(join(temp.path, "mine"));
    expect(() => writeHistoryFile(join(temp.path, "mine"), head, counted(1, 4).view(0, 4))).toThrow("EEXIST");
    expect(readFileSync(join(temp.path, "mine"))).toEqual(before);
  });

  it("give a state back as it was, with a buffer of its own, or refuse it", () => {
    const state = Float64Array.of(1, Number.NaN, -0);
    const piece = writeCheckpointFile(temp.path, "states/s", {
      bytes: new Uint8Array(state.buffer),
      step: 9,
    });
    expect(piece).toMatchObject({ file: "states/s", step: 9, bytes: 24 });
    expect(readdirSync(join(temp.path, "states"))).toEqual(["s"]);
    const read = readCheckpointFile(temp.path, piece);
    expect(read.byteOffset).toBe(0);
    expect(new Float64Array(read.buffer)).toEqual(state);
    const path = join(temp.path, "states", "s");
    const whole = readFileSync(path);
    const flipped = Buffer.from(whole);
    flipped[20]! ^= 1;
    writeFileSync(path, flipped);
    expect(() => readCheckpointFile(temp.path, piece)).toThrow("check sum");
    writeFileSync(path, whole.subarray(0, 20));
    expect(() => readCheckpointFile(temp.path, piece)).toThrow("20 bytes, 24 were written");
    expect(() => readCheckpointFile(temp.path, { ...piece, file: "states/none" })).toThrow("damaged");
  });
});

describe("the last lines of an output", () => {
  it("are the last ones, however it is cut and however much there is", () => {
    const lines = new LastLines();
    for (let i = 0; i < 100; i++) lines.add(`line ${i}\nhalf`);
    expect(lines.lines.length).toBeLessThanOrEqual(41);
    expect(lines.lines.at(-1)).toBe("half");
    expect(lines.lines.at(-2)).toBe("halfline 99");
    lines.add("x".repeat(10_000_000));
    expect(lines.lines.at(-1)!.length).toBeLessThanOrEqual(500);
  });
});
