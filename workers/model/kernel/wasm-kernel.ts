import { badCore } from "./node-records.ts";
import type { PairKernel } from "./pair-kernel.ts";
import { typescriptKernel } from "./typescript-kernel.ts";
import { CHUNK, CHUNK_BYTES, copyIn, copyLattice, copyOut } from "./wasm-exchange.ts";
import { instantiate } from "./wasm-memory.ts";

/** Which of the module's two builds of the segment formula: `double`, or the faster `mixed` precision one. */
export type KernelVariant = "double" | "mixed";

/** Packs a lattice into records; returns the first node with a bad core, or -1. Addresses are byte offsets. */
type Pack = (
  rows: number,
  cols: number,
  nodes: number,
  stride: number,
  spanwise: number,
  streamwise: number,
  records: number,
) => number;

/** Adds the velocity of a packed lattice at n points to `out`. */
type Induce = (
  records: number,
  rows: number,
  cols: number,
  points: number,
  out: number,
  stride: number,
  n: number,
  scratch: number,
) => void;

/** What the module exports (workers/model/kernel/assembly). */
interface KernelExports {
  readonly packDouble: Pack;
  readonly packMixed: Pack;
  readonly induceDouble: Induce;
  readonly induceMixed: Induce;
}

/** Bytes of scratch that the lanes ask for, besides five vectors a column. */
const SCRATCH = 240;

/** Name of the mixed-precision arithmetic. */
export const MIXED_KERNEL_NAME = "rosenhead-moore-mixed/1";

/** Bytes a node record takes, and the name of the arithmetic. */
const VARIANTS = {
  double: { record: 128, name: typescriptKernel.name },
  mixed: { record: 80, name: MIXED_KERNEL_NAME },
} as const;

/**
 * The pair kernel in WebAssembly with 128-bit vectors whose lanes run over points.
 *
 * `double` gives the bits of typescriptKernel, and has its name. `mixed` writes each coordinate as the sum of two singles
 * (x = high + low, 48 bits), forms differences as (p.high - x.high) + (p.low - x.low), does the pair arithmetic and the sum
 * of a row in single and totals the rows in double; formula and order are otherwise those of typescriptKernel.
 *
 * Limits of `mixed`: measured error 5e-7 of the root mean square speed, 1.5e-5 of it at the worst point (a wing tip whose
 * columns lie closer than a core), on wakes whose edges are up to ten times their core; beyond that, up to 1e-7 (ℓ/μ)² of
 * the speed that the one edge induces, at points within its core.
 * Lengths between 1e-8 m and 1e8 m. A point that is a node feels nothing of the edges that meet there, exactly.
 *
 * @param bytes the compiled module
 * @returns a kernel with a memory of its own, grown in steps as the lattices grow
 * @throws UNAVAILABLE when the module does not compile here
 */
export function wasmKernel(bytes: Uint8Array, variant: KernelVariant): PairKernel {
  const { exports, memory } = instantiate<KernelExports>(bytes);
  const pack = variant === "double" ? exports.packDouble : exports.packMixed;
  const run = variant === "double" ? exports.induceDouble : exports.induceMixed;
  const { record, name } = VARIANTS[variant];
  const at = { points: 0, out: CHUNK_BYTES * 3, scratch: CHUNK_BYTES * 6, nodes: 0, stride: 0, records: 0 };
  return {
    name,
    induce(lattices, points, out) {
      for (const lattice of lattices) {
        const { rows, cols } = lattice;
        at.stride = rows * cols * 8;
        at.nodes = at.scratch + SCRATCH + cols * 80;
        at.records = at.nodes + at.stride * 6;
        memory.reserve(at.records + rows * cols * record);
        copyLattice(memory, lattice, at.nodes / 8, rows * cols);
        const edges = at.nodes + at.stride * 4;
        const bad = pack(rows, cols, at.nodes, at.stride, edges, edges + at.stride, at.records);
        if (bad >= 0) throw badCore(lattice.core[bad]!, Math.floor(bad / cols), bad % cols);
        for (let from = 0; from < points.n; from += CHUNK) {
          const n = Math.min(CHUNK, points.n - from);
          copyIn(memory, points, out, from, n);
          run(at.records, rows, cols, at.points, at.out, CHUNK_BYTES, (n + 3) & ~3, at.scratch);
          copyOut(memory, out, from, n);
        }
      }
    },
  };
}
