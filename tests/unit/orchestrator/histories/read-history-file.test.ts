import { mkdirSync } from "node:fs";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { AppError } from "../../../../orchestrator/contract/index.ts";
import { fileFailure } from "../../../../orchestrator/histories/file-failure.ts";
import {
  type ColumnChoice,
  type ForeignHistory,
  readHistoryFile,
} from "../../../../orchestrator/histories/read-history-file.ts";
import { tempFolder } from "../../../helpers/temp-folder.ts";

const folder = tempFolder();
let made = 0;

function read(content: string | Uint8Array, choice?: ColumnChoice): Promise<ForeignHistory> {
  made += 1;
  return readHistoryFile(folder.write(`${made}.csv`, content), "run.csv", choice);
}

async function refusal(content: string | Uint8Array, choice?: ColumnChoice): Promise<AppError> {
  const error: unknown = await read(content, choice).catch((e: unknown) => e);
  expect(error).toBeInstanceOf(AppError);
  return error as AppError;
}

const values = (history: ForeignHistory) =>
  Object.fromEntries(history.channels.map((c) => [c.name, [...c.values]]));

const plain = { CN: [1, 2, 3], CL: [4, 5, 6] };

describe("reads the tables that solvers write", () => {
  it.each([
    ["comma", "t,CN,CL\n0,1,4\n1,2,5\n2,3,6\n"],
    ["no line end after the last row", "t,CN,CL\n0,1,4\n1,2,5\n2,3,6"],
    ["carriage returns", "t,CN,CL\r\n0,1,4\r\n1,2,5\r\n2,3,6\r\n"],
    ["a byte-order mark", "\ufefft,CN,CL\n0,1,4\n1,2,5\n2,3,6\n"],
    ["semicolons", "t;CN;CL\n0;1;4\n1;2;5\n2;3;6\n"],
    ["tabs", "t\tCN\tCL\n0\t1\t4\n1\t2\t5\n2\t3\t6\n"],
    ["bars", "t|CN|CL\n0|1|4\n1|2|5\n2|3|6\n"],
    ["runs of blanks", "   t    CN   CL\n  0   1.0  4\n  1    2.0 5\n  2   3.   6  \n"],
    ["blanks after commas", "t, CN, CL\n0, 1, 4\n1, 2, 5\n2, 3, 6\n"],
    ["a mark at every line's end", "t,CN,CL,\n0,1,4,\n1,2,5,\n2,3,6,\n"],
    ["quoted names and cells", '"t","CN","CL"\n"0","1","4"\n1,2,5\n2,3,6\n'],
    ["blank lines and comments", "# made up\n\nt,CN,CL\n0,1,4\n\n# restart\n1,2,5\n2,3,6\n\n"],
    ["a header that is a comment", "# lantern\n# t CN CL\n0 1 4\n1 2 5\n2 3 6\n"],
    ["a comma header that is a comment", "# t,CN,CL\n0,1,4\n1,2,5\n2,3,6\n"],
    ["exponents, Fortran's too", "t,CN,CL\n0,1e0,4D+00\n1.0e0,20E-1,5\n2,.3d1,6\n"],
  ])("%s", async (_, content) => {
    const history = await read(content);
    expect(history.timeName).toBe("t");
    expect([...history.time]).toEqual([0, 1, 2]);
    expect(values(history)).toEqual(plain);
    expect(history.notes).toEqual([]);
  });

  it("gzip, told by content", async () => {
    expect(values(await read(gzipSync("t,CN,CL\n0,1,4\n1,2,5\n2,3,6\n")))).toEqual(plain);
  });

  it("UTF-16 with its mark", async () => {
    expect(
      values(await read(Buffer.from("\ufefft\tCN\tCL\n0\t1\t4\n1\t2\t5\n2\t3\t6\n", "utf16le"))),
    ).toEqual(plain);
  });

  it("decimal commas between semicolons, and says that it did", async () => {
    const history = await read("t;CN\n0;1\n0,5;-2,25\n1;3e-1\n");
    expect([...history.time]).toEqual([0, 0.5, 1]);
    expect(values(history)).toEqual({ CN: [1, -2.25, 0.3] });
    expect(history.notes).toEqual(["commas in numbers were read as decimal marks"]);
  });

  it("NaN and infinity in a channel, in the usual spellings", async () => {
    const history = await read("t,a,b\n0,NaN,nan\n1,-inf,Infinity\n2,1.#QNAN,-nan(ind)\n");
    expect(values(history)).toEqual({
      a: [Number.NaN, -Infinity, Number.NaN],
      b: [Number.NaN, Infinity, Number.NaN],
    });
  });

  it("another column as time, and only the channels asked for", async () => {
    const content = "step,t,CN,label\n9,0,1,x\n8,1,2,y\n";
    const history = await read(content, { time: "t", channels: ["CN"] });
    expect([...history.time]).toEqual([0, 1]);
    expect(values(history)).toEqual({ CN: [1, 2] });
  });

  it("any finite numbers, to the last bit", async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.double({ noNaN: true, noDefaultInfinity: true }), { minLength: 2, maxLength: 50 }),
        fc.constantFrom(",", ";", "\t", " "),
        async (numbers, mark) => {
          const rows = numbers.map((x, i) => `${i}${mark}${x}`);
          const history = await read(`t${mark}x\n${rows.join("\n")}\n`);
          expect([...history.channels[0]!.values]).toEqual(
            numbers.map((x) => (Object.is(x, -0) ? 0 : x) + 0),
          );
        },
      ),
      { numRuns: 60, seed: 20260801 },
    );
  });

  it("a table longer than one chunk, with the right line in an error", async () => {
    const rows = Array.from({ length: 150_000 }, (_, i) => `${i},${i / 8}`);
    const history = await read(`t,CN\n${rows.join("\n")}\n`);
    expect(history.time.length).toBe(150_000);
    expect(history.channels[0]!.values[149_999]).toBe(149_999 / 8);
    rows[140_000] = "140000,oops";
    expect((await refusal(`t,CN\n${rows.join("\n")}\n`)).where).toBe('run.csv:140002:2 (column 2, "CN")');
  });
});

describe("says what is wrong with a table, where, and what to do", () => {
  it.each<[string, string, string, string | undefined, RegExp]>([
    [
      "text in a cell",
      "t,CN\n0,1\n1,abc\n",
      '"abc" is not a number',
      'run.csv:3:2 (column 2, "CN")',
      /NaN.*--channel/,
    ],
    ["an empty cell", "t,CN,CL\n0,,1\n", "a cell is empty", 'run.csv:2:2 (column 2, "CN")', /written NaN/],
    [
      "hexadecimal",
      "t,CN\n0,1\n1, 0x1F\n",
      '"0x1F" is not a number',
      'run.csv:3:2 (column 2, "CN")',
      /Correct/,
    ],
    [
      "an overflowed Fortran field",
      "t,CN\n0,****\n",
      '"****" is not',
      'run.csv:2:2 (column 2, "CN")',
      /Correct/,
    ],
    ["NaN as time", "t,CN\n0,1\nNaN,2\n", "the time is NaN", 'run.csv:3:1 (column 1, "t")', /rise/],
    ["infinite time", "t,CN\n0,1\ninf,2\n", "the time is Infinity", 'run.csv:3:1 (column 1, "t")', /rise/],
    [
      "falling time",
      "t,CN\n0,1\n2,1\n1.5,2\n",
      "falls from 2 to 1.5",
      'run.csv:4:1 (column 1, "t")',
      /restarted/,
    ],
    ["repeated time", "t,CN\n0,1\n0,2\n", "the time 0 comes twice", 'run.csv:3:1 (column 1, "t")', /--time/],
    [
      "a short row",
      "t,CN,CL\n0,1,2\n1,2\n",
      "2 values where the header names 3",
      "run.csv:3",
      /being written/,
    ],
    ["a long row", "t;CN\n0;1\n1;2;3\n", "3 values where the header names 2", "run.csv:3", /Complete/],
    ["decimal commas between commas", "t,CN\n0,1,5\n1,2,5\n", "3 values where", "run.csv:2", /semicolons/],
    [
      "two decimal marks",
      "t;CN\n0;1,5\n1;2.5\n",
      '"2.5" is not a number',
      'run.csv:3:2 (column 2, "CN")',
      /same decimal/,
    ],
    [
      "one column",
      "CN\n1\n2\n",
      'one column only ("CN")',
      "run.csv:1",
      /comma, semicolon, tab, bar or blanks/,
    ],
    ["a header and no rows", "t,CN\n", "a header but no rows", "run.csv:1", /solver wrote/],
    ["one row", "t,CN\n0,1\n", "it has 1 row", "run.csv", /two rows/],
    ["nothing", "", "the file is empty", "run.csv:1", /t,CN,CL/],
    ["nothing but a mark and a line end", "\ufeff\n", "the file is empty", "run.csv:1", /t,CN,CL/],
    ["no header", "0,1\n1,2\n", "the header is missing", "run.csv:1", /name the columns/],
    [
      "no header below a comment",
      "# a made up run\n0,1\n1,2\n",
      "the header is missing",
      "run.csv:2",
      /name the columns/,
    ],
    [
      "a name given twice",
      "t,CN,CN\n0,1,2\n",
      'columns 2 and 3 are both called "CN"',
      "run.csv:1",
      /of its own/,
    ],
    ["a nameless column", "t,,CN\n0,1,2\n", "column 2 has no name", "run.csv:1", /name the columns/],
  ])("%s", async (_, content, what, where, fix) => {
    const error = await refusal(content);
    expect(error.code).toBe("HISTORY_INVALID");
    expect(error.message).toContain("run.csv");
    expect(error.message).toContain(what);
    expect(error.where).toBe(where);
    expect(error.fix).toMatch(fix);
  });

  it("a column that is not there, with the nearest one that is", async () => {
    const error = await refusal("time,CN\n0,1\n1,2\n", { time: "tiem" });
    expect(error.message).toContain('no column "tiem"');
    expect(error.fix).toContain('Did you mean "time"?');
  });

  it("time named as the only channel", async () => {
    const error = await refusal("t,CN\n0,1\n1,2\n", { channels: ["t"] });
    expect(error.message).toContain('"t" is the time, no channel');
  });

  it("binary data", async () => {
    const error = await refusal(new Uint8Array([0x50, 0x41, 0x52, 0x31, 0, 1, 2]));
    expect(error).toMatchObject({ code: "FILE_UNREADABLE", where: "run.csv" });
    expect(error.message).toContain("binary");
  });

  it("a gzip file cut short, and one with a damaged middle", async () => {
    const rows = Array.from({ length: 5000 }, (_, i) => `${i},${Math.sqrt(i)}`);
    const whole = gzipSync(`t,CN\n${rows.join("\n")}\n`);
    expect((await refusal(whole.subarray(0, 9000))).message).toContain("its end is missing");
    const damaged = Buffer.from(whole);
    damaged.fill(0xff, 9000, 9050);
    expect((await refusal(damaged)).message).toContain("damaged");
  });

  it("a line that never ends", async () => {
    const error = await refusal(`t,CN\n0,1\n1,${"1".repeat(3 << 20)}\n`);
    expect(error.message).toContain("a line of more than 1048576 characters");
  });

  it("a missing file, a folder, a path through a file", async () => {
    const file = folder.write("there.csv", "t,CN\n0,1\n1,2\n");
    mkdirSync(join(folder.path, "sub"));
    const failure = (path: string) => readHistoryFile(path, path).catch((e: unknown) => e);
    expect(await failure(join(folder.path, "gone.csv"))).toMatchObject({ code: "FILE_NOT_FOUND" });
    expect(await failure(join(file, "x.csv"))).toMatchObject({ code: "FILE_NOT_FOUND" });
    expect(await failure(join(folder.path, "sub"))).toMatchObject({
      code: "FILE_UNREADABLE",
      fix: expect.stringContaining("*.csv"),
    });
  });

  it("a file that may not be read", () => {
    expect(fileFailure({ code: "EACCES" }, "run.csv")).toMatchObject({
      code: "FILE_UNREADABLE",
      message: "cannot read run.csv: you are not allowed to read it",
      where: "run.csv",
      fix: expect.stringContaining("permissions"),
    });
  });

  it("an error of the system that has no words of ours", () => {
    const error = fileFailure(Object.assign(new Error("EIO: i/o error, read"), { code: "EIO" }), "run.csv");
    expect(error).toMatchObject({ code: "FILE_UNREADABLE", where: "run.csv" });
    expect(error.message).toBe("cannot read run.csv: EIO: i/o error, read");
  });
});
