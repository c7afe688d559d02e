import { type ChildProcessWithoutNullStreams, spawn, spawnSync } from "node:child_process";
import { join } from "node:path";
import type { Lattice, Points, Velocities } from "../../workers/model/kernel/index.ts";
import { packRecords, RECORD } from "../../workers/model/kernel/node-records.ts";

const COMPILER = "gcc";
const FLAGS = ["-O3", "-march=native", "-fno-math-errno", "-fno-trapping-math"];

/** Builds lattice-reference.c into `folder`; returns the program's path, or null with no compiler on the machine. */
export function buildNativePeer(folder: string): { program: string; compiler: string } | null {
  const version = spawnSync(COMPILER, ["--version"], { encoding: "utf8" });
  if (version.error !== undefined || version.status !== 0) return null;
  const program = join(folder, "lattice-reference");
  const source = join(import.meta.dirname, "lattice-reference.c");
  const built = spawnSync(COMPILER, [...FLAGS, source, "-lm", "-o", program], { encoding: "utf8" });
  if (built.status !== 0) throw new Error(`lattice-reference.c does not compile: ${built.stderr}`);
  return { program, compiler: `${version.stdout.split("\n")[0]} ${FLAGS.join(" ")}` };
}

/** A running native program that holds one problem. */
export interface NativePeer {
  /** Computes once; CPU seconds that it took. */
  run(): Promise<number>;
  /** The velocities of the last run. */
  velocities(): Promise<Velocities>;
  stop(): void;
}

/** Starts the program and gives it lattices and points. */
export function startNativePeer(program: string, lattices: readonly Lattice[], points: Points): NativePeer {
  const child = spawn(program);
  child.stdin.write(problem(lattices, points));
  return {
    async run() {
      child.stdin.write("r");
      let line = "";
      while (!line.endsWith("\n")) line += (await more(child)).toString("latin1");
      return Number(line);
    },
    async velocities() {
      child.stdin.write("w");
      const parts: Buffer[] = [];
      let bytes = 0;
      while (bytes < 24 * points.n) {
        const part = await more(child);
        parts.push(part);
        bytes += part.length;
      }
      const all = new Float64Array(Uint8Array.from(Buffer.concat(parts)).buffer);
      const n = points.n;
      return { u: all.slice(0, n), v: all.slice(n, 2 * n), w: all.slice(2 * n) };
    },
    stop: () => child.stdin.end(),
  };
}

/** The next piece of output, or an error when the program ends instead. */
function more(child: ChildProcessWithoutNullStreams): Promise<Buffer> {
  const ready = child.stdout.read() as Buffer | null;
  if (ready !== null) return Promise.resolve(ready);
  return new Promise((resolve, reject) => {
    const ended = () => reject(new Error("the native program ended early"));
    child.once("exit", ended);
    child.stdout.once("readable", () => {
      child.off("exit", ended);
      more(child).then(resolve, reject);
    });
  });
}

function problem(lattices: readonly Lattice[], points: Points): Buffer {
  const parts: (Int32Array | Float64Array)[] = [Int32Array.of(lattices.length, points.n)];
  for (const a of [points.x, points.y, points.z]) parts.push(a.slice(0, points.n));
  for (const lattice of lattices) {
    const records = new Float64Array(lattice.rows * lattice.cols * RECORD);
    packRecords(lattice, records);
    parts.push(Int32Array.of(lattice.rows, lattice.cols), records);
  }
  return Buffer.concat(parts.map((part) => new Uint8Array(part.buffer)));
}
