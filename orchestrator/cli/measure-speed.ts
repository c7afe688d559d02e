import { createLattice, type Lattice, type PairKernel } from "../../workers/model/kernel/index.ts";

/** Size of a usual wake: the speed of small lattices is lower, of larger ones the same. */
const ROWS = 60;
const COLUMNS = 20;
/** CPU time spent on measuring, s: long enough to be within a few percent, short enough not to be noticed. */
const MEASURED_SECONDS = 0.08;
/** Share of a run's time that goes into pairs; the rest is the wing's solve, moving of nodes and bookkeeping. */
const PAIR_SHARE = 0.85;

/**
 * Speed of a pair kernel on this machine, by timing it on a lattice of the size of a usual wake.
 *
 * Limits: an estimate for planning; the CPU may run slower once every core is busy.
 *
 * @returns segment–point pairs a second of a whole run on one core, work outside the kernel included
 */
export function measureSpeed(kernel: PairKernel): number {
  const lattice = sampleLattice();
  const points = { x: lattice.x, y: lattice.y, z: lattice.z, n: ROWS * COLUMNS };
  const out = { u: new Float64Array(points.n), v: new Float64Array(points.n), w: new Float64Array(points.n) };
  const segments = ROWS * (COLUMNS - 1) + (ROWS - 1) * COLUMNS;
  // The first call compiles.
  kernel.induce([lattice], points, out);
  let seconds = 0;
  let pairs = 0;
  while (seconds < MEASURED_SECONDS) {
    const before = process.cpuUsage();
    kernel.induce([lattice], points, out);
    const { user, system } = process.cpuUsage(before);
    // A clock too coarse to see the call must not keep the loop for ever.
    seconds += Math.max((user + system) / 1e6, 1e-4);
    pairs += segments * points.n;
  }
  return (PAIR_SHARE * pairs) / seconds;
}

function sampleLattice(): Lattice {
  const lattice = createLattice(ROWS, COLUMNS);
  lattice.rows = ROWS;
  for (let i = 0; i < ROWS * COLUMNS; i++) {
    lattice.x[i] = Math.floor(i / COLUMNS) * 0.1;
    lattice.y[i] = (i % COLUMNS) * 0.1;
    lattice.z[i] = 0.02 * Math.sin(i);
    lattice.core[i] = 0.02;
  }
  lattice.spanwise.fill(1);
  lattice.streamwise.fill(1);
  return lattice;
}
