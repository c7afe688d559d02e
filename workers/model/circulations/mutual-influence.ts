import type { Rotor, Sections } from "../rotor/rotor.ts";
import { addRingVelocity, ringCorners, type VelocitySum } from "../segment-velocity.ts";
import type { Wing } from "../wing/wing.ts";

/** Velocities that bound rings of circulation 1 induce on each other's bodies; row-major. */
export interface MutualInfluence {
  /** At section i by blade ring j: components, each [sections * sections]. */
  readonly bladeOnBlade: { readonly u: Float64Array; readonly v: Float64Array; readonly w: Float64Array };
  /** At section i by wing ring j: components, each [sections * panels]. */
  readonly wingOnBlade: { readonly u: Float64Array; readonly v: Float64Array; readonly w: Float64Array };
  /** Normal velocity at control point i of the wing by blade ring j, [panels * sections]. */
  readonly bladeOnWing: Float64Array;
}

/** Room for a wing of so many panels and rotors of so many sections. */
export function createMutualInfluence(panels: number, sections: number): MutualInfluence {
  const components = (n: number) => ({
    u: new Float64Array(n),
    v: new Float64Array(n),
    w: new Float64Array(n),
  });
  return {
    bladeOnBlade: components(sections * sections),
    wingOnBlade: components(sections * panels),
    bladeOnWing: new Float64Array(panels * sections),
  };
}

/** Writes the influences for where wing and blades are now. */
export function writeMutualInfluence(
  out: MutualInfluence,
  wing: Wing,
  rotors: readonly Rotor[],
  sections: Sections,
): void {
  const sum: VelocitySum = [0, 0, 0];
  const point: VelocitySum = [0, 0, 0];
  for (const rotor of rotors) {
    for (const { bound, firstSection } of rotor.blades) {
      for (let c = 0; c < bound.cols - 1; c++) {
        const corners = ringCorners(0, c, bound.cols);
        const column = firstSection + c;
        for (let i = 0; i < sections.count; i++) {
          take(point, sections, i);
          addRingVelocity(bound, corners, rotor.selfCore, point, clear(sum));
          put(out.bladeOnBlade, i * sections.count + column, sum);
        }
        for (let i = 0; i < wing.panels; i++) {
          take(point, wing.points, i);
          addRingVelocity(bound, corners, rotor.boundCore, point, clear(sum));
          out.bladeOnWing[i * sections.count + column] =
            sum[0] * wing.normals.x[i]! + sum[1] * wing.normals.y[i]! + sum[2] * wing.normals.z[i]!;
        }
      }
    }
  }
  writeWingOnBlade(out, wing, sections, point, sum);
}

function writeWingOnBlade(
  out: MutualInfluence,
  wing: Wing,
  sections: Sections,
  point: VelocitySum,
  sum: VelocitySum,
): void {
  const { strips } = wing.geometry;
  for (let j = 0; j < wing.panels; j++) {
    const corners = ringCorners(Math.floor(j / strips), j % strips, strips + 1);
    for (let i = 0; i < sections.count; i++) {
      take(point, sections, i);
      addRingVelocity(wing.bound, corners, wing.surfaceCore, point, clear(sum));
      put(out.wingOnBlade, i * wing.panels + j, sum);
    }
  }
}

interface Places {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
}

function take(point: VelocitySum, places: Places, i: number): void {
  point[0] = places.x[i]!;
  point[1] = places.y[i]!;
  point[2] = places.z[i]!;
}

function clear(sum: VelocitySum): VelocitySum {
  sum[0] = 0;
  sum[1] = 0;
  sum[2] = 0;
  return sum;
}

function put(to: MutualInfluence["bladeOnBlade"], at: number, sum: VelocitySum): void {
  to.u[at] = sum[0];
  to.v[at] = sum[1];
  to.w[at] = sum[2];
}
