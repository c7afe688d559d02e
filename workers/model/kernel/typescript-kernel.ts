import type { Lattice } from "./lattice.ts";
import { packRecords, RECORD } from "./node-records.ts";
import type { PairKernel, Points, Velocities } from "./pair-kernel.ts";

/** A constant of this module: the compiler folds it, but reads an imported one anew in every pass of the loop. */
const STRIDE = RECORD;

let records = new Float64Array(0);
let above = new Float64Array(0);

/**
 * Velocity of filament lattices with the Rosenhead–Moore kernel, in double precision, one point after another.
 *
 *   u = Γ/4π · (r1×r2)(R1+R2) / [R1 R2 (R1 R2 + r1·r2 + μ1 μ2)],  Ri² = ri² + μi²,  ri = p - xi
 *
 * This is the exact integral of Γ/4π ∫ dl×r / (r² + μ²)^{3/2} along a straight segment whose core length μ runs
 * linearly from μ1 to μ2: (r, μ) is then a straight line in four dimensions, and r1×r2 is constant along it. For
 * μ1 = μ2 it is the usual regularised segment.
 *
 * Evaluated in an equal form with fewer operations. With e = x2 - x1, S = R1 + R2 and ℓ² = e² + (μ2-μ1)²,
 *
 *   R1 R2 + r1·r2 + μ1 μ2 = (S² - ℓ²)/2,  r1×r2 = e×r2,  so  u = Γ/2π · S / (R1 R2 (S² - ℓ²)) · (e×r2)
 *
 * By Cauchy–Schwarz S² - ℓ² >= 4 μ1 μ2 > 0. Rounding can break that bound close to a long thin segment, so it is
 * enforced: no value on the filament itself is NaN or of wrong sign.
 *
 * Order of operations, which pins the bits. For each lattice, each point: the total starts at zero; for each row from 0:
 * the row's sum starts at zero; for each column from 0: r = p - x; R = √(((rx² + ry²) + rz²) + μ²); then the spanwise edge
 * that arrives from column c-1 (if c > 0), then the streamwise edge that arrives from row r-1 (row 0 has one of zero
 * strength, with R = 1 at its far end); each adds k (e×r) to the row's sum, k = (g S) / ((R1 R2) max(S² - ℓ², 4 μ1 μ2)),
 * R1 the far end's. The row's sum is added to the total, the total of the lattice to `out`. No fused multiply-add.
 *
 * Limits: cores must lie above zero. Relative rounding error near a filament grows as (ℓ/h)² · 1e-16, h² = d² + μ².
 *
 * @see Moore (1972), Finite amplitude waves on aircraft trailing vortices; Saffman (1992), Vortex Dynamics, §11
 *   (both from memory); Katz & Plotkin, Low-Speed Aerodynamics, §2.12 for μ = 0
 */
export const typescriptKernel: PairKernel = {
  name: "rosenhead-moore-f64/1",
  induce(lattices, points, out) {
    for (const lattice of lattices) {
      const nodes = lattice.rows * lattice.cols;
      if (records.length < nodes * RECORD) records = new Float64Array(2 * nodes * RECORD);
      if (above.length < lattice.cols) above = new Float64Array(2 * lattice.cols);
      packRecords(lattice, records);
      induceOne(lattice, records, above, points, out);
    }
  },
};

function induceOne(
  { rows, cols }: Lattice,
  rec: Float64Array,
  far: Float64Array,
  points: Points,
  out: Velocities,
): void {
  for (let p = 0; p < points.n; p++) {
    const px = points.x[p]!;
    const py = points.y[p]!;
    const pz = points.z[p]!;
    let tu = 0;
    let tv = 0;
    let tw = 0;
    far.fill(1, 0, cols);
    for (let r = 0, i = 0; r < rows; r++) {
      let u = 0;
      let v = 0;
      let w = 0;
      let left = 0;
      for (let c = 0; c < cols; c++, i += STRIDE) {
        const rx = px - rec[i]!;
        const ry = py - rec[i + 1]!;
        const rz = pz - rec[i + 2]!;
        const near = Math.sqrt(rx * rx + ry * ry + rz * rz + rec[i + 3]!);
        if (c > 0) {
          const s = left + near;
          const den = s * s - rec[i + 7]!;
          const floor = rec[i + 8]!;
          const k = (rec[i + 9]! * s) / (left * near * Math.max(den, floor));
          u += k * (rec[i + 5]! * rz - rec[i + 6]! * ry);
          v += k * (rec[i + 6]! * rx - rec[i + 4]! * rz);
          w += k * (rec[i + 4]! * ry - rec[i + 5]! * rx);
        }
        const top = far[c]!;
        const s = top + near;
        const den = s * s - rec[i + 13]!;
        const floor = rec[i + 14]!;
        const k = (rec[i + 15]! * s) / (top * near * Math.max(den, floor));
        u += k * (rec[i + 11]! * rz - rec[i + 12]! * ry);
        v += k * (rec[i + 12]! * rx - rec[i + 10]! * rz);
        w += k * (rec[i + 10]! * ry - rec[i + 11]! * rx);
        left = near;
        far[c] = near;
      }
      tu += u;
      tv += v;
      tw += w;
    }
    out.u[p] = out.u[p]! + tu;
    out.v[p] = out.v[p]! + tv;
    out.w[p] = out.w[p]! + tw;
  }
}
