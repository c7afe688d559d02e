// The wing: rings on the camber surface of a rigid wing, and what acts on them.
// Not here: the free wake behind it (wake/). Read wing-geometry.ts first, then this file.
import { inverse, Matrix } from "ml-matrix";
import { AppError } from "../../../orchestrator/contract/index.ts";
import { createLattice, type Lattice } from "../kernel/index.ts";
import type { Pose } from "../path/flight-path.ts";
import { addRingVelocity, ringCorners, type VelocitySum } from "../segment-velocity.ts";
import type { Vec3 } from "../vec3.ts";
import { createWake, type Wake } from "../wake/wake.ts";
import { placePoints, turnVectors } from "./place-vectors.ts";
import { type VectorArray, vectorArray, type WingGeometry } from "./wing-geometry.ts";

/** Core length with which the wing's lattice acts on itself, in mean chords: small against any panel. */
const SELF_CORE_CHORDS = 1e-4;

/** The wing in the ground frame, with its lattice, its wake and its circulations. */
export interface Wing {
  readonly geometry: WingGeometry;
  readonly panels: number;
  /** Bound lattice as wakes and rotors feel it, and as the wing itself does (same edges and places, thinner cores). */
  readonly bound: Lattice;
  readonly boundSelf: Lattice;
  /** Core lengths of the two, m. */
  readonly surfaceCore: number;
  readonly selfCore: number;
  readonly wake: Wake;
  /** Points of the geometry, normals and lengths in the ground frame. */
  readonly points: VectorArray;
  readonly normals: VectorArray;
  readonly chordTangents: VectorArray;
  readonly spanwiseLengths: VectorArray;
  readonly chordwiseLengths: VectorArray;
  /** Ring circulations now, one and two steps before, shape [panels], m²/s. */
  readonly circulation: Float64Array;
  readonly circulationBefore: Float64Array;
  readonly circulationTwoBefore: Float64Array;
  /** Inverse of the influence matrix, row-major, shape [panels * panels]. */
  readonly inverse: Float64Array;
}

/** The body at rest in the origin, flying against x: any placing gives the same influence matrix. */
const AT_REST: Pose = {
  position: [0, 0, 0],
  velocity: [0, 0, 0],
  forward: [-1, 0, 0],
  span: [0, 1, 0],
  normal: [0, 0, 1],
  spin: [0, 0, 0],
};

/**
 * Makes the wing with an empty wake.
 *
 * @throws CASE_INVALID where the lattice is so distorted that its influence matrix has no inverse
 */
export function createWing(
  geometry: WingGeometry,
  options: { readonly surfaceCore: number; readonly wakeRows: number },
): Wing {
  const { chordwise, strips } = geometry;
  const panels = chordwise * strips;
  const bound = createLattice(chordwise + 1, strips + 1);
  bound.rows = chordwise + 1;
  bound.core.fill(options.surfaceCore);
  const selfCore = SELF_CORE_CHORDS * geometry.planform.meanChordM;
  const boundSelf: Lattice = { ...bound, core: new Float64Array(bound.core.length).fill(selfCore) };
  const wing: Wing = {
    geometry,
    panels,
    bound,
    boundSelf,
    surfaceCore: options.surfaceCore,
    selfCore,
    wake: createWake(options.wakeRows, strips + 1),
    points: vectorArray(geometry.points.x.length),
    normals: vectorArray(panels),
    chordTangents: vectorArray(panels),
    spanwiseLengths: vectorArray(panels),
    chordwiseLengths: vectorArray(geometry.chordwiseLengths.x.length),
    circulation: new Float64Array(panels),
    circulationBefore: new Float64Array(panels),
    circulationTwoBefore: new Float64Array(panels),
    inverse: new Float64Array(panels * panels),
  };
  placeWing(wing, AT_REST);
  wing.inverse.set(inverseInfluence(wing));
  return wing;
}

/** Writes the wing's lattice, points and vectors for a pose. */
export function placeWing(wing: Wing, pose: Pose): void {
  const { geometry } = wing;
  placePoints(geometry.nodes, pose, wing.bound);
  placePoints(geometry.points, pose, wing.points);
  turnVectors(geometry.normals, pose, wing.normals);
  turnVectors(geometry.chordTangents, pose, wing.chordTangents);
  turnVectors(geometry.spanwiseLengths, pose, wing.spanwiseLengths);
  turnVectors(geometry.chordwiseLengths, pose, wing.chordwiseLengths);
}

/** Inverse of A, A_ij the normal velocity at control point i by ring j of circulation 1. */
function inverseInfluence(wing: Wing): Float64Array {
  const { panels, bound, points, normals, selfCore } = wing;
  const { strips } = wing.geometry;
  const matrix = new Matrix(panels, panels);
  const sum: VelocitySum = [0, 0, 0];
  for (let j = 0; j < panels; j++) {
    const corners = ringCorners(Math.floor(j / strips), j % strips, strips + 1);
    for (let i = 0; i < panels; i++) {
      sum.fill(0);
      const point: Vec3 = [points.x[i]!, points.y[i]!, points.z[i]!];
      addRingVelocity(bound, corners, selfCore, point, sum);
      matrix.set(i, j, sum[0] * normals.x[i]! + sum[1] * normals.y[i]! + sum[2] * normals.z[i]!);
    }
  }
  try {
    return Float64Array.from(inverse(matrix).to1DArray());
  } catch (cause) {
    throw new AppError("CASE_INVALID", "the wing's panels fold onto each other", {
      where: "wing",
      fix: "Use less sweep, twist or dihedral, or fewer panels.",
      cause,
    });
  }
}

/**
 * Circulations that make the surface impermeable.
 *
 *   Γ = A⁻¹ b,  b_i = - v_i · n_i
 *
 * @param right shape [panels], m/s: minus the normal velocity by everything but the wing's own rings
 */
export function solveWing({ inverse, panels, circulation }: Wing, right: Float64Array): void {
  for (let i = 0, at = 0; i < panels; i++) {
    let sum = 0;
    for (let j = 0; j < panels; j++, at++) sum += inverse[at]! * right[j]!;
    circulation[i] = sum;
  }
}

/** Writes the ring circulations to the edges of the bound lattice, which both lattices share. */
export function writeWingEdges({ bound, circulation, geometry }: Wing): void {
  const { chordwise, strips } = geometry;
  for (let k = 0; k <= chordwise; k++) {
    for (let j = 0; j < strips; j++) {
      const here = k < chordwise ? circulation[k * strips + j]! : 0;
      const ahead = k > 0 ? circulation[(k - 1) * strips + j]! : 0;
      bound.spanwise[k * strips + j] = here - ahead;
    }
    if (k === chordwise) continue;
    for (let j = 0; j <= strips; j++) {
      const left = j > 0 ? circulation[k * strips + j - 1]! : 0;
      const right = j < strips ? circulation[k * strips + j]! : 0;
      bound.streamwise[k * (strips + 1) + j] = left - right;
    }
  }
}
