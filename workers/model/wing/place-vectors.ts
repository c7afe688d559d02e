import type { Pose } from "../path/flight-path.ts";
import type { VectorArray } from "./wing-geometry.ts";

/** Writes body points to `out` in the ground frame. */
export function placePoints(body: VectorArray, pose: Pose, out: VectorArray): void {
  const [px, py, pz] = pose.position;
  turnVectors(body, pose, out);
  for (let i = 0; i < body.x.length; i++) {
    out.x[i] = out.x[i]! + px;
    out.y[i] = out.y[i]! + py;
    out.z[i] = out.z[i]! + pz;
  }
}

/** Writes body vectors to `out` in the ground frame. */
export function turnVectors(body: VectorArray, pose: Pose, out: VectorArray): void {
  const [fx, fy, fz] = pose.forward;
  const [sx, sy, sz] = pose.span;
  const [nx, ny, nz] = pose.normal;
  for (let i = 0; i < body.x.length; i++) {
    const f = body.x[i]!;
    const s = body.y[i]!;
    const n = body.z[i]!;
    out.x[i] = f * fx + s * sx + n * nx;
    out.y[i] = f * fy + s * sy + n * ny;
    out.z[i] = f * fz + s * sz + n * nz;
  }
}
