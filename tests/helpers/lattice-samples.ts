import {
  createLattice,
  type Lattice,
  type Points,
  type Velocities,
} from "../../workers/model/kernel/index.ts";

/** Seeded numbers in [0, 1) by 32-bit integer arithmetic alone, so that they are the same everywhere. */
export function seeded(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4_294_967_296;
  };
}

/** A crumpled sheet of rows by cols nodes about `pitch` metres apart, cores of a tenth to a half of that. */
export function sheet(rows: number, cols: number, random: () => number, pitch = 0.1): Lattice {
  const lattice = createLattice(Math.max(1, rows), cols);
  lattice.rows = rows;
  for (let i = 0; i < rows * cols; i++) {
    lattice.x[i] = pitch * (Math.floor(i / cols) + 0.3 * random());
    lattice.y[i] = pitch * ((i % cols) + 0.3 * random());
    lattice.z[i] = pitch * 0.5 * random();
    lattice.core[i] = pitch * (0.1 + 0.4 * random());
  }
  for (let i = 0; i < lattice.spanwise.length; i++) lattice.spanwise[i] = random() - 0.5;
  for (let i = 0; i < lattice.streamwise.length; i++) lattice.streamwise[i] = random() - 0.5;
  return lattice;
}

/** A filament through the given nodes, circulation 1 along their order. */
export function filament(
  nodes: readonly (readonly [number, number, number])[],
  core: number | readonly number[],
): Lattice {
  const lattice = createLattice(nodes.length, 1);
  lattice.rows = nodes.length;
  nodes.forEach(([x, y, z], i) => {
    lattice.x[i] = x;
    lattice.y[i] = y;
    lattice.z[i] = z;
    lattice.core[i] = typeof core === "number" ? core : core[i]!;
  });
  lattice.streamwise.fill(1);
  return lattice;
}

/** Points from coordinate triples. */
export const pointsAt = (list: readonly (readonly [number, number, number])[]): Points => ({
  x: Float64Array.from(list, (p) => p[0]),
  y: Float64Array.from(list, (p) => p[1]),
  z: Float64Array.from(list, (p) => p[2]),
  n: list.length,
});

/** n points strewn over a box of edge `size`. */
export const strewn = (n: number, random: () => number, size: number): Points =>
  pointsAt(
    Array.from({ length: n }, () => [size * random(), size * random(), size * (random() - 0.5)] as const),
  );

/** The nodes of lattices as points. */
export function nodesOf(lattices: readonly Lattice[]): Points {
  const all: [number, number, number][] = [];
  for (const l of lattices) {
    for (let i = 0; i < l.rows * l.cols; i++) all.push([l.x[i]!, l.y[i]!, l.z[i]!]);
  }
  return pointsAt(all);
}

/** Velocities at rest. */
export const still = (n: number): Velocities => ({
  u: new Float64Array(n),
  v: new Float64Array(n),
  w: new Float64Array(n),
});

/** Root mean square of the speed, and of the difference of two fields with its largest, all in m/s. */
export function compare(
  found: Velocities,
  wanted: Velocities,
): { rms: number; error: number; worst: number } {
  const n = wanted.u.length;
  let speed = 0;
  let error = 0;
  let worst = 0;
  for (let i = 0; i < n; i++) {
    const d =
      (found.u[i]! - wanted.u[i]!) ** 2 +
      (found.v[i]! - wanted.v[i]!) ** 2 +
      (found.w[i]! - wanted.w[i]!) ** 2;
    speed += wanted.u[i]! ** 2 + wanted.v[i]! ** 2 + wanted.w[i]! ** 2;
    error += d;
    worst = Math.max(worst, d);
  }
  return { rms: Math.sqrt(speed / n), error: Math.sqrt(error / n), worst: Math.sqrt(worst) };
}
