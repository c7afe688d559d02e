import { createLattice, type Lattice } from "../../workers/model/kernel/index.ts";

/** Circulations of edges from ring strengths, ring (r, c) between rows r, r+1 and columns c, c+1. */
function fromRings(lattice: Lattice, ring: (r: number, c: number) => number): Lattice {
  const { rows, cols } = lattice;
  const at = (r: number, c: number) => (r < 0 || c < 0 || r >= rows - 1 || c >= cols - 1 ? 0 : ring(r, c));
  for (let r = 0; r < rows; r++) {
    for (let c = 0; c + 1 < cols; c++) lattice.spanwise[r * (cols - 1) + c] = at(r, c) - at(r - 1, c);
  }
  for (let r = 0; r + 1 < rows; r++) {
    for (let c = 0; c < cols; c++) lattice.streamwise[r * cols + c] = at(r, c - 1) - at(r, c);
  }
  return lattice;
}

function shaped(
  rows: number,
  cols: number,
  node: (r: number, c: number) => readonly [number, number, number],
): Lattice {
  const lattice = createLattice(rows, cols);
  lattice.rows = rows;
  for (let r = 0; r < rows; r++) {
    for (let c = 0; c < cols; c++) {
      const i = r * cols + c;
      const [x, y, z] = node(r, c);
      lattice.x[i] = x;
      lattice.y[i] = y;
      lattice.z[i] = z;
      lattice.core[i] = 0.013 * Math.sqrt(1 + 0.02 * r);
    }
  }
  return lattice;
}

/** An invented rotor wake of one blade: a helix of radius 0.24 m, 18 rows a turn, pitch 0.4 m, waved. */
export const helixWake = (rows: number, cols: number): Lattice =>
  fromRings(
    shaped(rows, cols, (r, c) => {
      const radius = 0.24 * (0.2 + (0.8 * c) / Math.max(1, cols - 1)) * (1 + 0.1 * Math.sin(0.13 * r + c));
      const angle = (Math.PI / 9) * r;
      return [0.022 * r + 0.01 * Math.sin(0.37 * r), radius * Math.cos(angle), radius * Math.sin(angle)];
    }),
    (r, c) =>
      0.5 * Math.sqrt(((c + 0.5) / cols) * (1 - (c + 0.5) / cols)) * (1 + 0.1 * Math.sin((Math.PI / 9) * r)),
  );

/** An invented wing wake: span 2.4 m, rows 0.022 m apart, tips drawn in and down, waved. */
export const wingWake = (rows: number, cols: number): Lattice =>
  fromRings(
    shaped(rows, cols, (r, c) => {
      const angle = (Math.PI * c) / Math.max(1, cols - 1);
      const x = 0.022 * r;
      const down = 0.05 * Math.cos(angle) ** 4 * Math.min(2, x);
      return [
        x,
        -1.2 * Math.cos(angle) * (1 - 0.05 * Math.min(1, 0.1 * x)),
        0.01 * Math.sin(0.3 * r + 0.7 * c) - down,
      ];
    }),
    (r, c) => 2 * Math.sin((Math.PI * (c + 0.5)) / cols) * (1 + 0.05 * Math.sin(0.2 * r)),
  );
