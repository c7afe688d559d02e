import { AppError } from "../../../orchestrator/contract/index.ts";
import type { Lattice } from "./lattice.ts";

/** Circulations below this size, m²/s, count as zero, so that no product of them is a slow subnormal number. */
const CIRCULATION_FLOOR = 1e-20;

/** 1 / 2π, which turns a circulation into the factor of the segment formula. */
const INV_TWO_PI = 1 / (2 * Math.PI);

/** Numbers a node: x, y, z, μ², then six for the edge that arrives along the row, six for the one along the column. */
export const RECORD = 16;

/** Offset of the spanwise edge (r, c-1) -> (r, c) in the record of node (r, c): e, ℓ², floor, Γ/2π. */
const SPANWISE = 4;

/** Offset of the streamwise edge (r-1, c) -> (r, c) in the record of node (r, c), laid out like the spanwise one. */
const STREAMWISE = 10;

/**
 * Writes what the segment formula needs of every node and edge, once for all points, to `records`.
 *
 *   e = x2 - x1,  ℓ² = e·e + (μ2 - μ1)²,  floor = 4 μ1 μ2,  g = Γ / 2π
 *
 * An edge that does not exist (column 0, row 0) has e = 0, ℓ² = 0, floor = 1, g = 0 and so induces nothing.
 *
 * @param records at least rows * cols * RECORD numbers
 * @throws BUG when a core is not above zero
 */
export function packRecords(lattice: Lattice, records: Float64Array): void {
  const { rows, cols, x, y, z, core, spanwise, streamwise } = lattice;
  for (let r = 0; r < rows; r++) {
    for (let c = 0; c < cols; c++) {
      const node = r * cols + c;
      const at = node * RECORD;
      const mu = core[node]!;
      if (!(mu > 0)) throw badCore(mu, r, c);
      records[at] = x[node]!;
      records[at + 1] = y[node]!;
      records[at + 2] = z[node]!;
      records[at + 3] = mu * mu;
      if (c === 0) clearEdge(records, at + SPANWISE);
      else packEdge(lattice, node - 1, node, spanwise[r * (cols - 1) + c - 1]!, records, at + SPANWISE);
      if (r === 0) clearEdge(records, at + STREAMWISE);
      else packEdge(lattice, node - cols, node, streamwise[node - cols]!, records, at + STREAMWISE);
    }
  }
}

function packEdge(
  lattice: Lattice,
  from: number,
  to: number,
  gamma: number,
  records: Float64Array,
  at: number,
): void {
  const ex = lattice.x[to]! - lattice.x[from]!;
  const ey = lattice.y[to]! - lattice.y[from]!;
  const ez = lattice.z[to]! - lattice.z[from]!;
  const step = lattice.core[to]! - lattice.core[from]!;
  records[at] = ex;
  records[at + 1] = ey;
  records[at + 2] = ez;
  records[at + 3] = ex * ex + ey * ey + ez * ez + step * step;
  records[at + 4] = 4 * lattice.core[from]! * lattice.core[to]!;
  records[at + 5] = Math.abs(gamma) < CIRCULATION_FLOOR ? 0 : gamma * INV_TWO_PI;
}

function clearEdge(records: Float64Array, at: number): void {
  records.fill(0, at, at + 6);
  records[at + 4] = 1;
}

/** The error for a core that is zero, negative or not a number. */
export const badCore = (core: number, row: number, column: number): AppError =>
  new AppError("BUG", `a vortex core of ${core} m at row ${row}, column ${column}`, {
    where: "induced velocity",
    fix: "give every node a core length above zero",
  });
