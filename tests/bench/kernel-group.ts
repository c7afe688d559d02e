import { readFileSync } from "node:fs";
import {
  type Lattice,
  type PairKernel,
  type Points,
  treeKernel,
  typescriptKernel,
  type Velocities,
  wasmKernel,
} from "../../workers/model/kernel/index.ts";
import { compare, nodesOf, still } from "../helpers/lattice-samples.ts";
import { helixWake, wingWake } from "../helpers/wake-samples.ts";
import { startNativePeer } from "./native-peer.ts";

/** What one group of interleaved repeats measured: CPU seconds (medians) and errors relative to the mean speed. */
export interface GroupResult {
  readonly pairs: number;
  readonly seconds: Readonly<Record<string, number>>;
  readonly mixedError: { readonly rms: number; readonly max: number };
  readonly nativeError: number | null;
  readonly trees: readonly TreeResult[];
  readonly growth: Readonly<Record<string, number>>;
}

/** A treecode against the direct kernel on one wake. */
export interface TreeResult {
  readonly wake: string;
  readonly allowed: number;
  readonly ratio: number;
  readonly rms: number;
  readonly max: number;
}

const ROUNDS = 5;

/** Middle value. */
export function median(values: readonly number[]): number {
  const sorted = values.toSorted((a, b) => a - b);
  return (sorted[(sorted.length - 1) >> 1]! + sorted[sorted.length >> 1]!) / 2;
}

function cpuSeconds(work: () => void): number {
  const before = process.cpuUsage();
  work();
  const used = process.cpuUsage(before);
  return (used.user + used.system) / 1e6;
}

function run(kernel: PairKernel, lattices: readonly Lattice[], points: Points): Velocities {
  const out = still(points.n);
  kernel.induce(lattices, points, out);
  return out;
}

/** Medians of interleaved repeats: every candidate once a round, after one round that does not count. */
async function interleaved(
  candidates: Readonly<Record<string, () => number | Promise<number>>>,
  rounds: number,
): Promise<Record<string, number>> {
  const times = new Map<string, number[]>(Object.keys(candidates).map((name) => [name, []]));
  for (let round = 0; round <= rounds; round++) {
    for (const [name, candidate] of Object.entries(candidates)) {
      const seconds = await candidate();
      if (round > 0) times.get(name)!.push(seconds);
    }
  }
  return Object.fromEntries([...times].map(([name, list]) => [name, median(list)]));
}

/** One group: a process of its own measures everything once over. */
export async function measureGroup(modulePath: string, nativeProgram: string | null): Promise<GroupResult> {
  const bytes = readFileSync(modulePath);
  const double = wasmKernel(bytes, "double");
  const mixed = wasmKernel(bytes, "mixed");
  const lattices = [helixWake(75, 10), helixWake(75, 10), helixWake(75, 10), wingWake(40, 30)];
  const points = nodesOf(lattices);
  const edges = lattices.reduce((sum, l) => sum + l.rows * (l.cols - 1) + (l.rows - 1) * l.cols, 0);
  const native = nativeProgram === null ? null : startNativePeer(nativeProgram, lattices, points);
  const timed = (kernel: PairKernel) => () => cpuSeconds(() => void run(kernel, lattices, points));
  const seconds = await interleaved(
    {
      typescript: timed(typescriptKernel),
      double: timed(double),
      mixed: timed(mixed),
      ...(native === null ? {} : { native: () => native.run() }),
    },
    ROUNDS,
  );
  const exact = run(double, lattices, points);
  const error = compare(run(mixed, lattices, points), exact);
  const peer = native === null ? null : compare(await native.velocities(), exact);
  native?.stop();
  return {
    pairs: edges * points.n,
    seconds,
    mixedError: { rms: error.error / error.rms, max: error.worst / error.rms },
    nativeError: peer === null ? null : peer.worst / peer.rms,
    trees: [
      ...(await treesOn("rotor wake", [helixWake(1600, 10)], bytes, mixed, double)),
      ...(await treesOn("wing wake", [wingWake(500, 32)], bytes, mixed, double)),
    ],
    growth: {
      "rows only": await growth(bytes, mixed, [wingWake(125, 32), wingWake(2000, 32)]),
      "rows and columns": await growth(bytes, mixed, [wingWake(63, 64), wingWake(250, 256)]),
    },
  };
}

async function treesOn(
  wake: string,
  lattices: readonly Lattice[],
  bytes: Uint8Array,
  direct: PairKernel,
  exact: PairKernel,
): Promise<TreeResult[]> {
  const points = nodesOf(lattices);
  const wanted = run(exact, lattices, points);
  const trees = [1e-3, 1e-4].map((relativeError) => treeKernel({ bytes, relativeError, direct }));
  const timed = (kernel: PairKernel) => () => cpuSeconds(() => void run(kernel, lattices, points));
  const seconds = await interleaved(
    { direct: timed(direct), coarse: timed(trees[0]!), fine: timed(trees[1]!) },
    2,
  );
  return ["coarse", "fine"].map((name, i) => {
    const { rms, error, worst } = compare(run(trees[i]!, lattices, points), wanted);
    const ratio = seconds.direct! / seconds[name]!;
    return { wake, allowed: [1e-3, 1e-4][i]!, ratio, rms: error / rms, max: worst / rms };
  });
}

/** Exponent with which the treecode's cost grows from the first wake to the second, every node a point. */
async function growth(
  bytes: Uint8Array,
  direct: PairKernel,
  wakes: readonly [Lattice, Lattice],
): Promise<number> {
  const kernel = treeKernel({ bytes, relativeError: 1e-3, direct });
  const [small, large] = wakes.map((wake) => {
    const points = nodesOf([wake]);
    return { n: points.n, time: () => cpuSeconds(() => void run(kernel, [wake], points)) };
  }) as [{ n: number; time: () => number }, { n: number; time: () => number }];
  const seconds = await interleaved({ small: small.time, large: large.time }, 3);
  return Math.log(seconds.large! / seconds.small!) / Math.log(large.n / small.n);
}
