import { edgeLength, type Wake } from "../wake/wake.ts";

/** What is watched of all wakes together. */
export interface WakeMonitors {
  speedMax: number;
  speedSquares: number;
  segmentMax: number;
  filamentLength: number;
  nodes: number;
  /** Σ Γ times vector area, m⁴/s. */
  readonly area: Float64Array;
}

/** Monitors before anything is added. */
export const createWakeMonitors = (): WakeMonitors => ({
  speedMax: 0,
  speedSquares: 0,
  segmentMax: 0,
  filamentLength: 0,
  nodes: 0,
  area: new Float64Array(3),
});

/** Forgets what was added, in place. */
export function clearMonitors(out: WakeMonitors): void {
  out.speedMax = 0;
  out.speedSquares = 0;
  out.segmentMax = 0;
  out.filamentLength = 0;
  out.nodes = 0;
  out.area.fill(0);
}

/**
 * Adds a wake to the monitors.
 *
 * @param windAt undisturbed wind along x at a height, m/s: speeds count without it
 */
export function addWake(wake: Wake, windAt: (z: number) => number, out: WakeMonitors): void {
  const { lattice, velocity } = wake;
  const { rows, cols } = lattice;
  for (let i = 0; i < rows * cols; i++) {
    const u = velocity.u[i]! - windAt(lattice.z[i]!);
    const square = u * u + velocity.v[i]! ** 2 + velocity.w[i]! ** 2;
    out.speedSquares += square;
    out.speedMax = Math.max(out.speedMax, Math.sqrt(square));
    const c = i % cols;
    if (c > 0) addEdge(edgeLength(lattice, i - 1, i), out);
    if (i >= cols) addEdge(edgeLength(lattice, i - cols, i), out);
    if (c > 0 && i >= cols) addRing(wake, i, out.area);
  }
  out.nodes += rows * cols;
}

function addEdge(length: number, out: WakeMonitors): void {
  out.filamentLength += length;
  out.segmentMax = Math.max(out.segmentMax, length);
}

/** Adds Γ ½ d1 × d2 of the ring whose last corner is node i, d its diagonals. */
function addRing({ lattice, rings }: Wake, i: number, area: Float64Array): void {
  const { cols, x, y, z } = lattice;
  const row = Math.floor(i / cols) - 1;
  const half = 0.5 * rings[row * (cols - 1) + (i % cols) - 1]!;
  const a = i - cols - 1;
  const ax = x[i]! - x[a]!;
  const ay = y[i]! - y[a]!;
  const az = z[i]! - z[a]!;
  const bx = x[i - 1]! - x[i - cols]!;
  const by = y[i - 1]! - y[i - cols]!;
  const bz = z[i - 1]! - z[i - cols]!;
  area[0] = area[0]! + half * (ay * bz - az * by);
  area[1] = area[1]! + half * (az * bx - ax * bz);
  area[2] = area[2]! + half * (ax * by - ay * bx);
}
