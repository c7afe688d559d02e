import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { CAUTION } from "../../../../orchestrator/contract/index.ts";
import { runInProcess } from "../../../helpers/run-in-process.ts";
import { seededUniform } from "../../../helpers/seeded.ts";
import { tempFolder } from "../../../helpers/temp-folder.ts";

const folder = tempFolder();
const check = (...args: string[]) => runInProcess(["check", ...args], { cwd: folder.path });

/** Independent uniform numbers about a mean, invented, one column a seed. */
function noise(rows: number, seeds: readonly number[], dt = 1): string {
  const draws = seeds.map((seed) => seededUniform(seed));
  const lines = Array.from({ length: rows }, (_, i) =>
    [i * dt, ...draws.map((draw, k) => 1 + k + 0.1 * (draw() - 0.5))].join(","),
  );
  return `t,${seeds.map((_, k) => `c${k + 1}`).join(",")}\n${lines.join("\n")}\n`;
}

folder.write("good.csv", noise(3000, [424242, 535353]));
folder.write("short.csv", noise(150, [616161]));
folder.write("text.csv", "t,CN\n0,1\n1,oops\n");
folder.write(
  "nan.csv",
  `t,CN\n${Array.from({ length: 900 }, (_, i) => `${i},${i === 700 ? "NaN" : 1 + (i % 7) / 100}`).join("\n")}\n`,
);
folder.write(
  "uneven.csv",
  `t,CN\n${Array.from({ length: 900 }, (_, i) => `${i + (i % 3) / 10},${1 + ((i * 7919) % 13) / 1000}`).join("\n")}\n`,
);

describe("midwatch check --json", () => {
  it("answers in the order given, with everything that a script needs", async () => {
    const { status, stdout, stderr } = await check("short.csv", "good.csv", "--json", "--tolerance", "1%");
    expect({ status, stderr }).toEqual({ status: 1, stderr: "" });
    const document = JSON.parse(stdout);
    expect(Object.keys(document)).toEqual(["files", "caution"]);
    expect(document.caution).toBe(CAUTION);
    expect(document.files.map((f: { file: string }) => f.file)).toEqual(["short.csv", "good.csv"]);
    const [short, good] = document.files;
    expect(short).toMatchObject({
      samples: 150,
      channels: { c1: { verdict: "needs-longer", samplesNeeded: [expect.any(Number), expect.any(Number)] } },
    });
    expect(good).toMatchObject({ samples: 3000, dt: 1, onset: null });
    expect(Object.keys(good.channels)).toEqual(["c1", "c2"]);
    expect(good.channels.c1).toEqual({
      verdict: "accepted",
      mean: expect.closeTo(1, 2),
      plainMean: expect.closeTo(1, 2),
      halfWidth: expect.any(Number),
      confidence: 0.95,
      tolerance: expect.closeTo(0.01, 3),
      window: { fromIndex: expect.any(Number), toIndex: 3000, fromTime: expect.any(Number), toTime: 2999 },
      effectiveSamples: expect.any(Number),
      period: null,
      warnings: expect.any(Array),
      samplesNeeded: null,
      hiddenDrift: expect.any(Number),
      tests: expect.arrayContaining([
        {
          name: expect.any(String),
          statistic: expect.any(Number),
          limit: expect.any(Number),
          p: null,
          passed: true,
          words: expect.any(String),
        },
      ]),
      words: expect.any(String),
    });
  });

  it("ends with 0 when all is accepted", async () => {
    expect((await check("good.csv", "--json", "--tolerance", "1%")).status).toBe(0);
  });

  it("names the sample at which a channel stops being a number", async () => {
    const { stdout } = await check("nan.csv", "--json");
    const [file] = JSON.parse(stdout).files;
    // What lies before the guard may still be averaged, and nothing behind it.
    expect(file.channels.CN).toMatchObject({ verdict: "accepted", warnings: ["before-onset"] });
    expect(file.channels.CN.window.toIndex).toBeLessThan(700);
    expect(file.onset).toMatchObject({
      kind: "non-finite",
      channel: "CN",
      index: 700,
      time: 700,
      alarmIndex: 700,
    });
  });

  it("says that uneven time was resampled", async () => {
    const { stdout } = await check("uneven.csv", "--json");
    expect(JSON.parse(stdout).files[0].notes.join()).toContain("uneven");
  });

  it("prints nothing rather than half an answer, and names every file that it cannot read", async () => {
    const { status, stdout, stderr } = await check("good.csv", "text.csv", "gone.csv", "--json");
    expect({ status, stdout }).toEqual({ status: 2, stdout: "" });
    expect(stderr).toContain('where: text.csv:3:2 (column 2, "CN")');
    expect(stderr).toContain("code:  FILE_NOT_FOUND");
    expect(stderr).toContain("nothing is printed");
  });
});

describe("options of midwatch check", () => {
  const verdict = async (...args: string[]) => {
    const { stdout } = await check(...args, "--json");
    return JSON.parse(stdout).files[0];
  };

  it("tolerance decides, absolute or in percent", async () => {
    expect((await verdict("good.csv", "--tolerance", "0.00001")).channels.c1.verdict).toBe("needs-longer");
    expect((await verdict("good.csv", "--tolerance", "0.5%")).channels.c2.tolerance).toBeCloseTo(0.01, 3);
  });

  it("confidence widens the interval", async () => {
    const usual = (await verdict("good.csv")).channels.c1;
    const wide = (await verdict("good.csv", "--confidence", "0.99")).channels.c1;
    expect(wide.confidence).toBe(0.99);
    expect(wide.halfWidth).toBeGreaterThan(1.2 * usual.halfWidth);
  });

  it("a period in samples and the same in time give the same answer", async () => {
    folder.write("half.csv", noise(3000, [424242], 0.5));
    const samples = await verdict("half.csv", "--period", "36.5", "--period", "10");
    expect(samples.channels.c1.period).toMatchObject({ source: "declared" });
    expect(await verdict("half.csv", "--period-time", "18.25", "--period-time", "5")).toEqual(samples);
  });

  it("time and channel choose columns", async () => {
    folder.write("steps.csv", "step,t,CN,remark\n0,0,1,a\n1,0.5,1,b\n2,1,1,c\n");
    const file = await verdict("steps.csv", "--time", "t", "--channel", "CN");
    expect(file).toMatchObject({ dt: 0.5, samples: 3, channels: { CN: {} } });
    expect(Object.keys(file.channels)).toEqual(["CN"]);
  });

  it("refuses a period that the time step cannot show, naming the option", async () => {
    const { status, stderr } = await check("good.csv", "--period-time", "0.01");
    expect(status).toBe(2);
    expect(stderr).toContain("a period of 0.01 is shorter than two time steps of 1");
    expect(stderr).toContain("--period-time, for good.csv");
  });

  it.each([
    [["--tolerance", "tight"], "--tolerance does not take"],
    [["--confidence", "95"], "Did you mean 0.95?"],
    [["--period", "0"], "--period does not take"],
    [["--planned", "many"], "--planned does not take"],
    [["--time", "tt"], 'Did you mean "t"?'],
    [[], "missing required argument 'file'"],
  ])("refuses %j", async (args, words) => {
    const files = args.length === 0 ? [] : ["good.csv"];
    const { status, stdout, stderr } = await check(...files, ...args, "--json");
    expect({ status, stdout }).toEqual({ status: 2, stdout: "" });
    expect(stderr).toContain(words);
    expect(stderr).toMatch(/to do: \S/);
  });
});

describe("midwatch check for readers", () => {
  it("judges what it can read, names what it cannot, and ends with 2", async () => {
    const { status, stdout, stderr } = await check("text.csv", "good.csv", "--tolerance", "1%");
    expect(status).toBe(2);
    expect(stdout).toMatch(/^good.csv: 3000 samples, time step 1$/m);
    expect(stdout).toContain("2 of 2 channels in 1 file accepted.");
    expect(stderr).toContain("text.csv:3:2");
  });

  it("puts what is not to be used in parentheses, says why, and what would help", async () => {
    const { stdout } = await check("good.csv", "short.csv", "--tolerance", "0.00001");
    expect(stdout).toMatch(/c1 {2}needs-longer {3}\(1\.00\d+ ± 0\.00\d+ at 95 %\)/);
    expect(stdout).toMatch(/would help: \d+ to \d+ samples in all/);
    expect(stdout).toContain(CAUTION);
  });

  it("reads gzip", async () => {
    folder.write("packed.csv.gz", gzipSync(noise(3000, [424242])));
    expect((await check("packed.csv.gz")).stdout).toContain("packed.csv.gz: 3000 samples");
  });
});
