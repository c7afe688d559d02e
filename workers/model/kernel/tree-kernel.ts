import { AppError } from "../../../orchestrator/contract/index.ts";
import type { Lattice } from "./lattice.ts";
import { badCore } from "./node-records.ts";
import type { PairKernel, Points, Velocities } from "./pair-kernel.ts";
import { CHUNK, CHUNK_BYTES, copyIn, copyLattice, copyOut } from "./wasm-exchange.ts";
import { instantiate, type WasmMemory } from "./wasm-memory.ts";

/** What the module exports for trees (workers/model/kernel/assembly). Addresses are byte offsets into its memory. */
interface TreeExports {
  packMixed(
    rows: number,
    cols: number,
    nodes: number,
    stride: number,
    spanwise: number,
    streamwise: number,
    records: number,
  ): number;
  buildTree(
    rows: number,
    cols: number,
    nodes: number,
    stride: number,
    spanwise: number,
    streamwise: number,
    cells: number,
    drafts: number,
    allowed: number,
  ): number;
  induceTree(
    records: number,
    cells: number,
    count: number,
    cols: number,
    points: number,
    out: number,
    stride: number,
    n: number,
    scratch: number,
  ): void;
}

/** How a treecode is to work. */
export interface TreeOptions {
  /** The compiled module. */
  readonly bytes: Uint8Array;
  /** Root mean square error allowed, relative to the speed that a lattice induces at its own nodes: 1e-5 to 0.1. */
  readonly relativeError: number;
  /** The kernel for what is too small for a tree, and for the speed that the error is relative to. */
  readonly direct: PairKernel;
}

/** Nodes in all lattices below which trees are not worth their cost. Measured: 1.1 to 2.6 times as fast at 1024. */
const SMALLEST = 1024;
/** Nodes of one lattice below which it goes to the direct kernel in any company. */
const SMALLEST_LATTICE = 64;
/** Nodes of a lattice at which its own speed is sampled. */
const SAMPLES = 32;
/**
 * Error bound allowed to one cell, over the root mean square error allowed in all. The bound of a cell is two to ten
 * times its error, and errors of some hundred cells partly cancel. Measured on seven wakes: the whole comes out at 0.07
 * to 0.6 of what is allowed, and up to 0.9 where that is 1e-5.
 */
const SHARE = 1;
const RECORD_BYTES = 80;
const CELL_BYTES = 256;
const DRAFT_BYTES = 328;
/** Scratch of the walk: 288 bytes and one vector for each column of a leaf. */
const SCRATCH = 288 + 16 * 16;

/** The name of a treecode: that of its direct kernel, then the relative error. */
export const TREE_KERNEL_NAME = /^(.+)\+tree\(([\d.e-]+)\)\/1$/;

/**
 * A treecode: what far parts of a lattice induce comes from their filament moments, in a time that grows a little faster
 * than the number of nodes, in place of its square.
 *
 * A binary tree over the lattice's index space, leaves of at most 16 nodes, cells split along their longer side. A cell's
 * moments to second order about its centre, with its mean μ², stand for it from a distance d on at which
 *
 *   4 Σ|a|ρ³ / d⁵ and 3/4 Σ|a| (μ²max - μ²min) / d⁴ are below the error allowed,  d >= 1.4 radii,  d >= 5 μmax
 *
 * with a = Γ e / 4π and ρ the reach of each edge from the centre: the first is the size of the third-order term, the
 * second of what the mean core leaves out. Nearer by, leaves are summed by the segment formula in mixed precision. Every
 * point decides for itself, so its bits do not depend on the other points of the call. Below 1024 nodes in all lattices
 * together everything goes to the direct kernel; so do lattices below 64 nodes, and those that induce nothing on their
 * own nodes.
 *
 * Limits: the bound is on the root mean square over points like the lattice's own nodes, relative to the speed that the
 * lattice induces there (sampled at 32 nodes); the largest error has been up to twice what is allowed. Where lattices
 * cancel one another, the error relative to what remains is larger.
 *
 * @throws CASE_INVALID when the relative error lies outside 1e-5 to 0.1; UNAVAILABLE when the module does not compile here
 * @see Barnes & Hut (1986), A hierarchical O(N log N) force-calculation algorithm (from memory)
 */
export function treeKernel({ bytes, relativeError, direct }: TreeOptions): PairKernel {
  if (!(relativeError >= 1e-5 && relativeError <= 0.1)) {
    throw new AppError("CASE_INVALID", `a treecode error of ${relativeError}`, {
      where: "treeKernel",
      fix: "ask for a relative error between 1e-5 and 0.1, or use the direct kernel",
    });
  }
  const { exports, memory } = instantiate<TreeExports>(bytes);
  const speed = ownSpeed(direct);
  const one: Lattice[] = [];
  return {
    name: `${direct.name}+tree(${relativeError})/1`,
    induce(lattices, points, out) {
      let size = 0;
      for (const lattice of lattices) size += lattice.rows * lattice.cols;
      for (const lattice of lattices) {
        one[0] = lattice;
        const small = size < SMALLEST || lattice.rows * lattice.cols < SMALLEST_LATTICE;
        const allowed = small ? 0 : SHARE * relativeError * speed(lattice);
        if (allowed > 0) induceByTree(exports, memory, lattice, allowed, points, out);
        else direct.induce(one, points, out);
      }
    },
  };
}

function induceByTree(
  exports: TreeExports,
  memory: WasmMemory,
  lattice: Lattice,
  allowed: number,
  points: Points,
  out: Velocities,
): void {
  const { rows, cols } = lattice;
  const size = rows * cols;
  const scratch = CHUNK_BYTES * 6;
  const nodes = scratch + SCRATCH;
  const stride = size * 8;
  const edges = nodes + stride * 4;
  const records = nodes + stride * 6;
  const cells = records + size * RECORD_BYTES;
  const most = 2 * Math.ceil(size / 5) + 3;
  const drafts = cells + most * CELL_BYTES;
  memory.reserve(drafts + most * DRAFT_BYTES);
  copyLattice(memory, lattice, nodes / 8, size);
  const bad = exports.packMixed(rows, cols, nodes, stride, edges, edges + stride, records);
  if (bad >= 0) throw badCore(lattice.core[bad]!, Math.floor(bad / cols), bad % cols);
  const count = exports.buildTree(rows, cols, nodes, stride, edges, edges + stride, cells, drafts, allowed);
  for (let from = 0; from < points.n; from += CHUNK) {
    const n = Math.min(CHUNK, points.n - from);
    copyIn(memory, points, out, from, n);
    exports.induceTree(records, cells, count, cols, 0, CHUNK_BYTES * 3, CHUNK_BYTES, (n + 3) & ~3, scratch);
    copyOut(memory, out, from, n);
  }
}

/** Root mean square of the speed that a lattice induces at a sample of its own nodes, m/s. */
function ownSpeed(direct: PairKernel): (lattice: Lattice) => number {
  const field = () => new Float64Array(SAMPLES);
  const points = { x: field(), y: field(), z: field(), n: SAMPLES };
  const out = { u: field(), v: field(), w: field() };
  const one: Lattice[] = [];
  return (lattice) => {
    one[0] = lattice;
    for (let i = 0; i < SAMPLES; i++) {
      const node = Math.floor(((i + 0.5) * lattice.rows * lattice.cols) / SAMPLES);
      points.x[i] = lattice.x[node]!;
      points.y[i] = lattice.y[node]!;
      points.z[i] = lattice.z[node]!;
      out.u[i] = 0;
      out.v[i] = 0;
      out.w[i] = 0;
    }
    direct.induce(one, points, out);
    let sum = 0;
    for (let i = 0; i < SAMPLES; i++) sum += out.u[i]! ** 2 + out.v[i]! ** 2 + out.w[i]! ** 2;
    return Math.sqrt(sum / SAMPLES);
  };
}
