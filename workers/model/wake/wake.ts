// Free wakes: rows of a filament lattice behind a wing or a blade, shed, convected, aged and cut.
// Not here: what they induce (kernel/) and what sheds them. Read this file first.
import { createLattice, type Lattice, pushRow } from "../kernel/index.ts";

/** Numbers kept per node that convection needs: velocity now and one step before, m/s. */
interface NodeVelocities {
  readonly u: Float64Array;
  readonly v: Float64Array;
  readonly w: Float64Array;
}

/** How the cores of a wake develop. */
export interface CoreLaw {
  /** Core radius of a new row, m. */
  readonly radiusM: number;
  readonly growth: boolean;
  readonly viscosity: number;
  readonly a1: number;
  readonly strain: boolean;
}

/**
 * A wake: row 0 lies on the trailing edge that sheds it, the last row is the oldest. Ring (r, c) lies between rows r and r+1
 * and has one circulation; the lattice's edges are differences of rings.
 */
export interface Wake {
  readonly lattice: Lattice;
  /** Circulation of ring (r, c), shape [(capacityRows - 1) * (cols - 1)], m²/s. */
  readonly rings: Float64Array;
  readonly velocity: NodeVelocities;
  readonly before: NodeVelocities;
  /** Step at which a row was last on the trailing edge, and for how many velocities it has a past (1: Euler, 2: Adams–Bashforth). */
  readonly shedAt: Float64Array;
  readonly pasts: Float64Array;
  /** Length of the streamwise edge (r, c) when it left the trailing edge, m. */
  readonly firstLength: Float64Array;
  /** Steps in which row 0 has been at the trailing edge since the last row was shed. */
  heldSteps: number;
}

/** An empty wake with room for `capacityRows` rows of `cols` nodes. */
export function createWake(capacityRows: number, cols: number): Wake {
  const velocities = () => ({
    u: new Float64Array(capacityRows * cols),
    v: new Float64Array(capacityRows * cols),
    w: new Float64Array(capacityRows * cols),
  });
  return {
    lattice: createLattice(capacityRows, cols),
    rings: new Float64Array((capacityRows - 1) * (cols - 1)),
    velocity: velocities(),
    before: velocities(),
    shedAt: new Float64Array(capacityRows),
    pasts: new Float64Array(capacityRows),
    firstLength: new Float64Array((capacityRows - 1) * cols),
    heldSteps: 0,
  };
}

/** Makes a new row 0 for the trailing edge; the old one becomes row 1 and is free from now on. */
export function shedRow(wake: Wake, step: number): void {
  const { lattice, rings, velocity, before, shedAt, pasts, firstLength } = wake;
  const { rows, cols } = lattice;
  pushRow(lattice);
  rings.copyWithin(cols - 1, 0, Math.max(0, rows - 1) * (cols - 1));
  rings.fill(0, 0, cols - 1);
  firstLength.copyWithin(cols, 0, Math.max(0, rows - 1) * cols);
  for (const field of [velocity.u, velocity.v, velocity.w, before.u, before.v, before.w]) {
    field.copyWithin(cols, 0, rows * cols);
  }
  shedAt.copyWithin(1, 0, rows);
  pasts.copyWithin(1, 0, rows);
  shedAt[0] = step;
  pasts[0] = 0;
  if (rows > 0) shedAt[1] = step - 1;
  wake.heldSteps = 0;
}

/** Gives the ring at the trailing edge the mean over the steps since the last row of what was bound there a step before. */
export function feedFirstRing(wake: Wake, boundBefore: Float64Array, offset: number): void {
  if (wake.lattice.rows < 2) return;
  const held = wake.heldSteps;
  for (let c = 0; c < wake.lattice.cols - 1; c++) {
    wake.rings[c] = (wake.rings[c]! * held + boundBefore[offset + c]!) / (held + 1);
  }
  wake.heldSteps = held + 1;
}

/**
 * Moves the free rows, in place, by the velocities stored at the end of the step before: second-order Adams–Bashforth,
 * Euler for a row whose velocity was stored once.
 *
 *   x += dt (3/2 v_n - 1/2 v_{n-1})
 *
 * @param fromRow 0 where row 0 is about to be shed, 1 where it stays on the trailing edge
 */
export function convect(wake: Wake, dtSeconds: number, fromRow: number): void {
  const { lattice, velocity, before, pasts } = wake;
  const { rows, cols, x, y, z } = lattice;
  for (let r = fromRow; r < rows; r++) {
    const now = pasts[r]! > 1 ? 1.5 * dtSeconds : dtSeconds;
    const past = pasts[r]! > 1 ? -0.5 * dtSeconds : 0;
    for (let i = r * cols; i < (r + 1) * cols; i++) {
      x[i] = x[i]! + now * velocity.u[i]! + past * before.u[i]!;
      y[i] = y[i]! + now * velocity.v[i]! + past * before.v[i]!;
      z[i] = z[i]! + now * velocity.w[i]! + past * before.w[i]!;
    }
  }
}

/** Writes the edges of the lattice from its rings; the last row closes the oldest ring. */
export function writeEdges({ lattice, rings }: Wake): void {
  const { rows, cols, spanwise, streamwise } = lattice;
  const n = cols - 1;
  for (let r = 0; r < rows; r++) {
    for (let c = 0; c < n; c++) {
      const behind = r < rows - 1 ? rings[r * n + c]! : 0;
      const ahead = r > 0 ? rings[(r - 1) * n + c]! : 0;
      spanwise[r * n + c] = behind - ahead;
    }
    if (r === rows - 1) continue;
    for (let c = 0; c < cols; c++) {
      const left = c > 0 ? rings[r * n + c - 1]! : 0;
      const right = c < n ? rings[r * n + c]! : 0;
      streamwise[r * cols + c] = left - right;
    }
  }
}

/** Remembers how long the edges behind the trailing edge are, until the row that ends them there is shed. */
export function measureFirstLengths({ lattice, firstLength }: Wake): void {
  if (lattice.rows < 2) return;
  for (let c = 0; c < lattice.cols; c++) firstLength[c] = edgeLength(lattice, c, lattice.cols + c);
}

/** Distance of two nodes, m. */
export function edgeLength({ x, y, z }: Lattice, from: number, to: number): number {
  const dx = x[to]! - x[from]!;
  const dy = y[to]! - y[from]!;
  const dz = z[to]! - z[from]!;
  return Math.sqrt(dx * dx + dy * dy + dz * dz);
}

/** Puts row 0 onto a trailing edge: nodes `from` on of a bound lattice, in place. */
export function holdFirstRow({ lattice }: Wake, bound: Lattice, from: number): void {
  for (let c = 0; c < lattice.cols; c++) {
    lattice.x[c] = bound.x[from + c]!;
    lattice.y[c] = bound.y[from + c]!;
    lattice.z[c] = bound.z[from + c]!;
  }
}

/** Stores node velocities, entries `from` on of `found`; those stored before become the past ones. */
export function storeVelocities(
  { lattice, velocity, before, pasts }: Wake,
  found: { readonly u: Float64Array; readonly v: Float64Array; readonly w: Float64Array },
  from: number,
): void {
  const nodes = lattice.rows * lattice.cols;
  for (const key of ["u", "v", "w"] as const) {
    const now = velocity[key];
    const past = before[key];
    const source = found[key];
    for (let i = 0; i < nodes; i++) {
      past[i] = now[i]!;
      now[i] = source[from + i]!;
    }
  }
  // Row 0 moved with the body since its last velocity, which is no past of a free node.
  pasts[0] = 1;
  for (let r = 1; r < lattice.rows; r++) pasts[r] = Math.min(2, pasts[r]! + 1);
}
