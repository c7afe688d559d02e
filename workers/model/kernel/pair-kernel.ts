import type { Lattice } from "./lattice.ts";

/** Points at which a velocity is wanted: the first `n` entries of x, y and z, m. */
export interface Points {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
  n: number;
}

/** Velocity components, m/s, one entry a point. */
export interface Velocities {
  readonly u: Float64Array;
  readonly v: Float64Array;
  readonly w: Float64Array;
}

/** A way of computing the velocity that filament lattices induce at points. */
export interface PairKernel {
  /** Names the arithmetic: two kernels of one name give the same bits. Part of a run's identity. */
  readonly name: string;
  /**
   * Adds the velocity of all lattices at all points to `out`, lattice after lattice in the order given. The result at a
   * point depends on that point and the lattices alone, never on the other points of the call.
   */
  induce(lattices: readonly Lattice[], points: Points, out: Velocities): void;
}
