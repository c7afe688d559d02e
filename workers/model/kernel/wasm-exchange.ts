import type { Lattice } from "./lattice.ts";
import type { Points, Velocities } from "./pair-kernel.ts";
import type { WasmMemory } from "./wasm-memory.ts";

/** Points that go through a module at a time; the bits do not depend on it. A multiple of four. */
export const CHUNK = 2048;

/** Bytes of one coordinate or component of a chunk. */
export const CHUNK_BYTES = CHUNK * 8;

/** Copies a lattice of n nodes in: six stretches of n doubles from number `to` on: x, y, z, core, spanwise, streamwise. */
export function copyLattice(memory: WasmMemory, lattice: Lattice, to: number, n: number): void {
  const doubles = memory.doubles();
  for (let i = 0; i < n; i++) {
    doubles[to + i] = lattice.x[i]!;
    doubles[to + n + i] = lattice.y[i]!;
    doubles[to + 2 * n + i] = lattice.z[i]!;
    doubles[to + 3 * n + i] = lattice.core[i]!;
  }
  const spanwise = n - lattice.rows;
  for (let i = 0; i < spanwise; i++) doubles[to + 4 * n + i] = lattice.spanwise[i]!;
  const streamwise = n - lattice.cols;
  for (let i = 0; i < streamwise; i++) doubles[to + 5 * n + i] = lattice.streamwise[i]!;
}

/** Points and what `out` holds for them; lanes past the last point see the origin, and nobody reads what they give. */
export function copyIn(memory: WasmMemory, points: Points, out: Velocities, from: number, n: number): void {
  const doubles = memory.doubles();
  for (let i = 0; i < n; i++) {
    doubles[i] = points.x[from + i]!;
    doubles[CHUNK + i] = points.y[from + i]!;
    doubles[CHUNK * 2 + i] = points.z[from + i]!;
    doubles[CHUNK * 3 + i] = out.u[from + i]!;
    doubles[CHUNK * 4 + i] = out.v[from + i]!;
    doubles[CHUNK * 5 + i] = out.w[from + i]!;
  }
  for (let i = n; i < ((n + 3) & ~3); i++) {
    for (let field = 0; field < 6; field++) doubles[CHUNK * field + i] = 0;
  }
}

/** Velocities of a chunk, back to `out`. */
export function copyOut(memory: WasmMemory, out: Velocities, from: number, n: number): void {
  const doubles = memory.doubles();
  for (let i = 0; i < n; i++) {
    out.u[from + i] = doubles[CHUNK * 3 + i]!;
    out.v[from + i] = doubles[CHUNK * 4 + i]!;
    out.w[from + i] = doubles[CHUNK * 5 + i]!;
  }
}
