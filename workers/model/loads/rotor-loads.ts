import type { Rotor, Sections } from "../rotor/rotor.ts";

/** Loads of one rotor, signed so that a working turbine and a working propeller both have positive ones. */
export interface RotorLoads {
  /** Along the axis: downstream for a generating rotor, upstream for a propelling one, N. */
  thrust: number;
  /** Torque that the flow gives (generating) or takes (propelling), N m. */
  torque: number;
  /** Force on the rotor in the ground frame, N. */
  readonly force: Float64Array;
}

/**
 * Sums section forces of a rotor.
 *
 *   dF = ½ ρ W² c (cl l̂ + cd d̂) dr,  l̂ = s(-cos φ â + sin φ t̂),  d̂ = -sin φ â - cos φ t̂
 *
 * â upstream, t̂ in the direction of motion, s = 1 generating and -1 propelling.
 *
 * @param flow velocity of the air against the sections, everything included, m/s
 */
export function rotorLoads(
  rotor: Rotor,
  sections: Sections,
  flow: { readonly u: Float64Array; readonly v: Float64Array; readonly w: Float64Array },
  density: number,
  out: RotorLoads,
): void {
  const { layout, axis, polar, sense } = rotor;
  out.force.fill(0);
  let upstream = 0;
  let driving = 0;
  for (const { firstSection } of rotor.blades) {
    for (let k = 0; k < layout.radii.length; k++) {
      const i = firstSection + k;
      const t = [sections.tx[i]!, sections.ty[i]!, sections.tz[i]!] as const;
      const axial = -(flow.u[i]! * axis[0]! + flow.v[i]! * axis[1]! + flow.w[i]! * axis[2]!);
      const around = -(flow.u[i]! * t[0] + flow.v[i]! * t[1] + flow.w[i]! * t[2]);
      const speed = Math.sqrt(axial * axial + around * around);
      const alpha = sense * (Math.atan2(axial, around) - layout.pitches[k]!);
      const width = layout.edgeRadii[k + 1]! - layout.edgeRadii[k]!;
      const push = 0.5 * density * speed * layout.chords[k]! * width;
      const lift = sense * push * polar.cl(alpha);
      const drag = push * polar.cd(alpha);
      const alongAxis = -lift * around - drag * axial;
      const alongMotion = lift * axial - drag * around;
      upstream += alongAxis;
      driving += alongMotion * layout.radii[k]!;
      for (let d = 0; d < 3; d++) out.force[d] = out.force[d]! + alongAxis * axis[d]! + alongMotion * t[d]!;
    }
  }
  out.thrust = -sense * upstream;
  out.torque = sense * driving;
}
