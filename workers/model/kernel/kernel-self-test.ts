import { createLattice, type Lattice } from "./lattice.ts";
import type { PairKernel, Velocities } from "./pair-kernel.ts";

/** A fixed lattice of 4 by 5 nodes with every kind of edge, and its nodes as points. */
function sample(): Lattice {
  const lattice = createLattice(4, 5);
  lattice.rows = 4;
  for (let i = 0; i < 20; i++) {
    lattice.x[i] = Math.floor(i / 5) * 0.3 + (i % 3) * 0.03;
    lattice.y[i] = (i % 5) * 0.2;
    lattice.z[i] = ((i * 7) % 11) * 0.02;
    lattice.core[i] = 0.01 + (i % 4) * 0.003;
  }
  for (let i = 0; i < 16; i++) lattice.spanwise[i] = ((i * 5) % 7) - 3;
  for (let i = 0; i < 15; i++) lattice.streamwise[i] = ((i * 3) % 5) - 2;
  return lattice;
}

function velocities(kernel: PairKernel, lattice: Lattice): Velocities {
  const out = { u: new Float64Array(20), v: new Float64Array(20), w: new Float64Array(20) };
  kernel.induce([lattice], { x: lattice.x, y: lattice.y, z: lattice.z, n: 20 }, out);
  return out;
}

/**
 * Whether a kernel gives what the reference gives on a small fixed lattice: guards against a compiled module of another
 * version than the code beside it.
 *
 * @param tolerance largest difference of any component allowed, m/s, where speeds are of the order of 1; 0 for same bits
 */
export function kernelAgrees(kernel: PairKernel, reference: PairKernel, tolerance: number): boolean {
  const lattice = sample();
  const found = velocities(kernel, lattice);
  const wanted = velocities(reference, lattice);
  const near = (a: Float64Array, b: Float64Array) =>
    a.every((value, i) => Math.abs(value - b[i]!) <= tolerance);
  return near(found.u, wanted.u) && near(found.v, wanted.v) && near(found.w, wanted.w);
}
