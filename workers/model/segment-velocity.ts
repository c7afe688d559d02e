const INV_TWO_PI = 1 / (2 * Math.PI);

/** Where the functions of this file add up a velocity. */
export type VelocitySum = [number, number, number];

/** Corners of a ring in the order of its circulation, as indices of nodes. */
export type RingCorners = readonly [number, number, number, number];

/** Nodes of which rings are made. */
export interface Nodes {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
}

/**
 * Adds the velocity that a ring of four straight filaments with unit circulation and one core induces at a point, with the
 * formula of the pair kernel. For influence matrices: wakes and loads go through the kernel itself.
 *
 *   u = Σ 1/2π · S / (R1 R2 max(S² - ℓ², 4μ²)) · (e × r2),  Ri² = |ri|² + μ²,  S = R1 + R2,  e = x2 - x1
 *
 * @param mu core length, m, above zero
 */
export function addRingVelocity(
  nodes: Nodes,
  corners: RingCorners,
  mu: number,
  point: readonly [number, number, number],
  sum: VelocitySum,
): void {
  const mu2 = mu * mu;
  let ax = point[0] - nodes.x[corners[3]]!;
  let ay = point[1] - nodes.y[corners[3]]!;
  let az = point[2] - nodes.z[corners[3]]!;
  let ra = Math.sqrt(ax * ax + ay * ay + az * az + mu2);
  for (const corner of corners) {
    const bx = point[0] - nodes.x[corner]!;
    const by = point[1] - nodes.y[corner]!;
    const bz = point[2] - nodes.z[corner]!;
    const rb = Math.sqrt(bx * bx + by * by + bz * bz + mu2);
    const ex = ax - bx;
    const ey = ay - by;
    const ez = az - bz;
    const s = ra + rb;
    const room = Math.max(s * s - (ex * ex + ey * ey + ez * ez), 4 * mu2);
    const k = (INV_TWO_PI * s) / (ra * rb * room);
    sum[0] += k * (ey * bz - ez * by);
    sum[1] += k * (ez * bx - ex * bz);
    sum[2] += k * (ex * by - ey * bx);
    ax = bx;
    ay = by;
    az = bz;
    ra = rb;
  }
}

/** Corners of ring (row, column) of a lattice with `cols` nodes a row; its circulation runs along the row first. */
export const ringCorners = (row: number, column: number, cols: number): RingCorners => [
  row * cols + column,
  row * cols + column + 1,
  (row + 1) * cols + column + 1,
  (row + 1) * cols + column,
];
