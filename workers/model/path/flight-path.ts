// Where the wing is, how it is turned and how it moves: straight, on a circle, through a table of positions.
// Not here: pitch, and everything that hangs on the wing. Read this file first.
import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import type { Vec3 } from "../vec3.ts";
import { circlePath } from "./circle-path.ts";
import { straightPath } from "./straight-path.ts";
import { tablePath } from "./table-path.ts";

/** Place, attitude and motion of the wing's reference point (quarter chord at mid span), in the ground frame. */
export interface Pose {
  /** m. */
  readonly position: Vec3;
  /** m/s. */
  readonly velocity: Vec3;
  /** Unit vectors: flight direction, along the span (forward × normal), and the way the upper side looks. */
  readonly forward: Vec3;
  readonly span: Vec3;
  readonly normal: Vec3;
  /** Angular velocity of the body, rad/s. */
  readonly spin: Vec3;
}

/** A flight path in time. */
export interface FlightPath {
  poseAt(timeSeconds: number): Pose;
  /** Air's mean velocity against the body, in body axes (forward, span, normal), m/s: what rotors are set up for. */
  readonly designApparent: Vec3;
  /** Time of one loop, s; null where the path does not close. */
  readonly loopSeconds: number | null;
  /** Whether speed or attitude against the wind change along the path. */
  readonly varies: boolean;
  /** Lowest height against the path's origin, m. */
  readonly lowestM: number;
}

/**
 * The flight path of a case.
 *
 * @throws CASE_INVALID where the table of positions is no path
 */
export function flightPath(inputs: Pick<Case, "path" | "wind">): FlightPath {
  const { path, wind } = inputs;
  switch (path.kind) {
    case "straight":
      return straightPath(path.speed_mps, wind);
    case "circle":
      return circlePath(path, wind);
    case "table":
      return tablePath(path, wind);
  }
}
