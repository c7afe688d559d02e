import { AppError } from "../../../orchestrator/contract/index.ts";

/**
 * A lattice of straight vortex filaments: nodes in rows (row 0 nearest the body) and columns, edges shared by
 * neighbouring rings. Structure of arrays, allocated once at capacity; rows at and beyond `rows` mean nothing.
 */
export interface Lattice {
  /** Rows in use, 0 to capacityRows. */
  rows: number;
  readonly cols: number;
  readonly capacityRows: number;
  /** Node coordinates, m, shape [capacityRows * cols], node (r, c) at r * cols + c. */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
  /** Core length μ of each node, m, above zero; same shape as x. */
  readonly core: Float64Array;
  /** Circulation of edge (r, c) -> (r, c+1), m²/s, shape [capacityRows * (cols - 1)]. */
  readonly spanwise: Float64Array;
  /** Circulation of edge (r, c) -> (r+1, c), m²/s, shape [(capacityRows - 1) * cols]. */
  readonly streamwise: Float64Array;
}

/** An empty lattice (rows = 0) with room for `capacityRows` rows of `cols` nodes. */
export function createLattice(capacityRows: number, cols: number): Lattice {
  if (!Number.isInteger(capacityRows) || !Number.isInteger(cols) || capacityRows < 1 || cols < 1) {
    throw new AppError("BUG", `a lattice of ${capacityRows} rows and ${cols} columns`, {
      where: "createLattice",
      fix: "ask for at least one row and one column, in whole numbers",
    });
  }
  const nodes = () => new Float64Array(capacityRows * cols);
  return {
    rows: 0,
    cols,
    capacityRows,
    x: nodes(),
    y: nodes(),
    z: nodes(),
    core: nodes().fill(1),
    spanwise: new Float64Array(capacityRows * (cols - 1)),
    streamwise: new Float64Array((capacityRows - 1) * cols),
  };
}

/**
 * Makes room for a new row 0 by moving every row back by one, in place. The new row starts as a copy of the nodes that
 * stood at row 0, with zero circulation on its own edges and on the edges that tie it to row 1: the caller fills them.
 *
 * @throws BUG when the lattice is full: drop rows first
 */
export function pushRow(lattice: Lattice): void {
  const { rows, cols, capacityRows } = lattice;
  if (rows >= capacityRows) {
    throw new AppError("BUG", `a row pushed into a full lattice of ${capacityRows} rows`, {
      where: "pushRow",
      fix: "drop rows first, or create the lattice with a larger capacity",
    });
  }
  const nodes = rows * cols;
  for (const field of [lattice.x, lattice.y, lattice.z, lattice.core]) field.copyWithin(cols, 0, nodes);
  lattice.spanwise.copyWithin(cols - 1, 0, rows * (cols - 1));
  lattice.spanwise.fill(0, 0, cols - 1);
  if (rows > 0) {
    lattice.streamwise.copyWithin(cols, 0, (rows - 1) * cols);
    lattice.streamwise.fill(0, 0, cols);
  }
  lattice.rows = rows + 1;
}

/** Keeps the first `keep` rows and forgets the rest, in place; a lattice with fewer rows stays as it is. */
export function dropRows(lattice: Lattice, keep: number): void {
  if (keep < lattice.rows) lattice.rows = Math.max(0, keep);
}
