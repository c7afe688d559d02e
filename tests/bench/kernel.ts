// `npm run bench:kernel`: speed and error of the pair kernels, as ratios in one run, against what is demanded of them.
// CPU times; every candidate once a round; medians of the rounds of a group; every group a process of its own, held to one
// processor, and the figure the median over the groups, so that one slow group moves nothing.
// Options: --json, --groups N (odd). Exit 1 when a demand is not met.
import { type SpawnSyncReturns, spawnSync } from "node:child_process";
import { existsSync, mkdtempSync, rmSync } from "node:fs";
import { cpus, tmpdir } from "node:os";
import { join } from "node:path";
import { parseArgs } from "node:util";
import { type GroupResult, measureGroup, median } from "./kernel-group.ts";
import { buildNativePeer } from "./native-peer.ts";

interface Figure {
  readonly what: string;
  readonly found: number;
  readonly demand: number;
  readonly least: boolean;
  readonly groups: readonly number[];
}

const PINNER = "taskset";
const MODULE = join(import.meta.dirname, "../../dist/workers/model/kernel/lattice.wasm");

const { values } = parseArgs({
  options: {
    json: { type: "boolean", default: false },
    groups: { type: "string", default: "5" },
    group: { type: "boolean", default: false },
    native: { type: "string" },
  },
});

if (values.group) {
  process.stdout.write(JSON.stringify(await measureGroup(MODULE, values.native ?? null)));
} else {
  if (!existsSync(MODULE)) throw new Error(`no compiled kernel at ${MODULE}: run \`npm run build:kernel\``);
  const folder = mkdtempSync(join(tmpdir(), "midwatch-bench-"));
  try {
    report(folder);
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function report(folder: string): void {
  const native = buildNativePeer(folder);
  const groups: GroupResult[] = [];
  for (let i = 0; i < Number(values.groups); i++) {
    const args = ["--group", ...(native === null ? [] : ["--native", native.program])];
    const child = onProcessor(i % cpus().length, [...process.execArgv, import.meta.filename, ...args]);
    if (child.status !== 0) throw new Error(`a group failed: ${child.stderr}`);
    groups.push(JSON.parse(child.stdout) as GroupResult);
  }
  const figures = judge(groups);
  const failed = figures.filter((f) => (f.least ? f.found < f.demand : f.found > f.demand));
  const machine = { processor: cpus()[0]!.model, node: process.version, native: native?.compiler ?? null };
  if (values.json) console.log(JSON.stringify({ machine, figures, groups }, null, 2));
  else print(machine, groups, figures);
  process.exitCode = failed.length === 0 ? 0 : 1;
}

/** Runs Node on one processor, its children too, so that all candidates meet the same neighbours; anywhere without taskset. */
function onProcessor(processor: number, args: readonly string[]): SpawnSyncReturns<string> {
  const pinned = spawnSync(PINNER, ["-c", String(processor), process.execPath, ...args], {
    encoding: "utf8",
  });
  return pinned.error === undefined ? pinned : spawnSync(process.execPath, args, { encoding: "utf8" });
}

function judge(groups: readonly GroupResult[]): Figure[] {
  const over = (what: string, of: (g: GroupResult) => number, demand: number, least = true): Figure => {
    const each = groups.map(of);
    return { what, found: median(each), demand, least, groups: each };
  };
  const ratio = (a: string, b: string) => (g: GroupResult) => g.seconds[b]! / g.seconds[a]!;
  const tree = (allowed: number) => (g: GroupResult) =>
    Math.min(...g.trees.filter((t) => t.allowed === allowed).map((t) => t.ratio));
  const treeError = (g: GroupResult) => Math.max(...g.trees.map((t) => t.rms / t.allowed));
  return [
    over("f64x2 / TypeScript", ratio("double", "typescript"), 2),
    over("mixed / TypeScript", ratio("mixed", "typescript"), 4.5),
    ...(groups[0]!.seconds.native === undefined
      ? []
      : [over("mixed / C double", ratio("mixed", "native"), 0.85)]),
    over("mixed, error, rms", (g) => g.mixedError.rms, 1e-6, false),
    over("mixed, error, max", (g) => g.mixedError.max, 2e-5, false),
    over("treecode 1e-3 / mixed, 16k nodes", tree(1e-3), 8),
    over("treecode 1e-4 / mixed, 16k nodes", tree(1e-4), 3),
    over("treecode, rms error / allowed", treeError, 1, false),
    over("treecode, growth exponent 4k to 64k", (g) => Math.max(...Object.values(g.growth)), 1.2, false),
  ];
}

function print(
  machine: { processor: string; node: string; native: string | null },
  groups: readonly GroupResult[],
  figures: readonly Figure[],
): void {
  const short = (x: number) => (Math.abs(x) < 0.01 ? x.toExponential(1) : x.toFixed(2));
  console.log(`${machine.processor}, Node ${machine.node}; C: ${machine.native ?? "no gcc here, left out"}`);
  const { pairs, seconds } = groups[0]!;
  const nanoseconds = Object.keys(seconds).map((name) => {
    const each = groups.map((g) => (g.seconds[name]! / pairs) * 1e9);
    return `${name} ${short(median(each))} (${short(Math.min(...each))} to ${short(Math.max(...each))})`;
  });
  console.log(
    `ns a pair, ${(pairs / 1e6).toFixed(1)} M pairs, median of ${groups.length} groups: ${nanoseconds.join("; ")}`,
  );
  for (const f of figures) {
    const met = f.least ? f.found >= f.demand : f.found <= f.demand;
    const bound = `${f.least ? ">=" : "<="} ${short(f.demand)}`;
    const range = `${short(Math.min(...f.groups))} to ${short(Math.max(...f.groups))}`;
    console.log(
      `${met ? "met   " : "MISSED"} ${f.what.padEnd(38)} ${short(f.found).padStart(8)}  ${bound.padEnd(11)} groups ${range}`,
    );
  }
}
