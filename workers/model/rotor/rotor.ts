// Rotors: blades as lifting lines of radial sections with a section polar, each with a free wake of its own.
// Not here: how circulations are found (circulations/) and wakes move (wake/). Read this file first.
import type { Case, RotorInputs } from "../../../orchestrator/contract/case-schema.ts";
import { createLattice, type Lattice } from "../kernel/index.ts";
import type { Pose } from "../path/flight-path.ts";
import type { Timing } from "../timing.ts";
import { addScaled, cross, dot, radians, scaled, unit, type Vec3 } from "../vec3.ts";
import { createWake, type Wake } from "../wake/wake.ts";
import { type BladeLayout, bladeLayout, sense } from "./blade-layout.ts";
import { type SectionPolar, sectionPolar } from "./section-polar.ts";

/** Part of the chord from the lifting line to the trailing edge. */
const LINE_TO_TRAILING_EDGE = 0.75;

/** Core length with which bound lattices and first rows act on blades, in tip radii: small against any section. */
const SELF_CORE_RADII = 1e-3;

/** One blade: bound rings from the lifting line (row 0) to the trailing edge (row 1), and the wake. */
interface Blade {
  readonly bound: Lattice;
  readonly wake: Wake;
  /** Index of its first section among all sections of the case. */
  readonly firstSection: number;
}

/** One rotor. */
export interface Rotor {
  readonly inputs: RotorInputs;
  readonly layout: BladeLayout;
  readonly polar: SectionPolar;
  /** Hub in body axes, m, and the axis there, pointing upstream. */
  readonly hubBody: Vec3;
  readonly axisBody: Vec3;
  /** The axis, upstream, and the hub in the ground frame, with the hub's velocity, m/s; written when the rotor is placed. */
  readonly axis: Float64Array;
  readonly hub: Float64Array;
  readonly hubVelocity: Float64Array;
  /** Angular speed, rad/s, positive; sense of rotation about the axis; sense of the work. */
  readonly omega: number;
  readonly turn: 1 | -1;
  readonly sense: 1 | -1;
  /** Core length of the bound lattice and of the wake's first row, as wing and wakes feel them and as blades do, m. */
  readonly boundCore: number;
  readonly selfCore: number;
  readonly blades: readonly Blade[];
}

/** Sections of all rotors of a case, one entry a section; ground frame. */
export interface Sections {
  readonly count: number;
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
  /** Direction in which the section moves around the axis. */
  readonly tx: Float64Array;
  readonly ty: Float64Array;
  readonly tz: Float64Array;
  /** Velocity of the section, m/s. */
  readonly u: Float64Array;
  readonly v: Float64Array;
  readonly w: Float64Array;
}

/** Room for the sections of some rotors. */
export function createSections(rotors: readonly Rotor[]): Sections {
  const count = rotors.reduce((sum, rotor) => sum + rotor.inputs.blades * rotor.inputs.sections, 0);
  const column = () => new Float64Array(count);
  return {
    count,
    x: column(),
    y: column(),
    z: column(),
    tx: column(),
    ty: column(),
    tz: column(),
    u: column(),
    v: column(),
    w: column(),
  };
}

/** Makes the rotors of a case, with empty wakes. */
export function createRotors(
  inputs: Case,
  times: Timing,
  body: { readonly designApparent: Vec3; readonly chordForward: Vec3; readonly chordNormal: Vec3 },
  coreLength: (radius: number) => number,
): Rotor[] {
  let firstSection = 0;
  const { rotor_wake_rows: rows, truncate_every: every } = inputs.numerics;
  return inputs.rotors.map((rotor, index) => {
    const field = `rotors.${index + 1}`;
    const polar = sectionPolar(rotor.polar, field);
    const cols = rotor.sections + 1;
    const blades = Array.from({ length: rotor.blades }, () => {
      const bound = createLattice(2, cols);
      bound.rows = 2;
      const blade = { bound, wake: createWake(rows + every + 1, cols), firstSection };
      firstSection += rotor.sections;
      return blade;
    });
    const boundCore = coreLength(rotor.radius_m);
    for (const { bound } of blades) bound.core.fill(boundCore);
    return {
      inputs: rotor,
      layout: bladeLayout(rotor, polar, field),
      polar,
      hubBody: addScaled(
        addScaled(scaled(body.chordForward, rotor.ahead_m), body.chordNormal, rotor.above_m),
        [0, 1, 0],
        rotor.along_span_m,
      ),
      axisBody: axisInBody(rotor, body.designApparent),
      axis: new Float64Array(3),
      hub: new Float64Array(3),
      hubVelocity: new Float64Array(3),
      omega: times.rotorSpeeds[index]!,
      turn: rotor.rotation === "right-handed" ? 1 : -1,
      sense: sense(rotor),
      boundCore,
      selfCore: SELF_CORE_RADII * rotor.radius_m,
      blades,
    };
  });
}

/** The axis, upstream, in body axes: against the design apparent wind, then yawed about the normal and pitched about the span. */
function axisInBody(rotor: RotorInputs, designApparent: Vec3): Vec3 {
  const [f, s, n] = unit(scaled(designApparent, -1));
  const yaw = radians(rotor.axis_yaw_deg);
  const pitch = radians(rotor.axis_pitch_deg);
  const forward = f * Math.cos(yaw) - s * Math.sin(yaw);
  const across = f * Math.sin(yaw) + s * Math.cos(yaw);
  return [
    forward * Math.cos(pitch) - n * Math.sin(pitch),
    across,
    forward * Math.sin(pitch) + n * Math.cos(pitch),
  ];
}

/** A body vector in the ground frame. */
export const inGround = ([f, s, n]: Vec3, pose: Pose): Vec3 =>
  addScaled(addScaled(scaled(pose.forward, f), pose.span, s), pose.normal, n);

/** Writes bound lattices and sections of a rotor for a pose and a time. */
export function placeRotor(rotor: Rotor, pose: Pose, timeSeconds: number, sections: Sections): void {
  const axis = inGround(rotor.axisBody, pose);
  const hub = addScaled(pose.position, inGround(rotor.hubBody, pose), 1);
  const first = unit(addScaled(pose.span, axis, -dot(pose.span, axis)));
  const second = cross(axis, first);
  const spin = addScaled(pose.spin, axis, rotor.turn * rotor.omega);
  const hubVelocity = addScaled(pose.velocity, cross(pose.spin, addScaled(hub, pose.position, -1)), 1);
  rotor.axis.set(axis);
  rotor.hub.set(hub);
  rotor.hubVelocity.set(hubVelocity);
  rotor.blades.forEach((blade, b) => {
    const angle =
      radians(rotor.inputs.phase_deg) +
      (2 * Math.PI * b) / rotor.blades.length +
      rotor.turn * rotor.omega * timeSeconds;
    const radial = addScaled(scaled(first, Math.cos(angle)), second, Math.sin(angle));
    const tangential = scaled(cross(axis, radial), rotor.turn);
    placeBlade(blade, rotor.layout, { hub, axis, radial, tangential });
    placeSections(blade, rotor.layout, sections, { hub, radial, tangential, spin, hubVelocity });
  });
}

function placeBlade(
  { bound }: Blade,
  layout: BladeLayout,
  at: { readonly hub: Vec3; readonly axis: Vec3; readonly radial: Vec3; readonly tangential: Vec3 },
): void {
  const { cols, x, y, z } = bound;
  for (let c = 0; c < cols; c++) {
    const pitch = layout.edgePitches[c]!;
    const back = LINE_TO_TRAILING_EDGE * layout.edgeChords[c]!;
    const line = addScaled(at.hub, at.radial, layout.edgeRadii[c]!);
    const aft = addScaled(
      addScaled(line, at.tangential, -back * Math.cos(pitch)),
      at.axis,
      -back * Math.sin(pitch),
    );
    [x[c], y[c], z[c]] = line as [number, number, number];
    [x[cols + c], y[cols + c], z[cols + c]] = aft as [number, number, number];
  }
}

function placeSections(
  blade: Blade,
  layout: BladeLayout,
  out: Sections,
  at: {
    readonly hub: Vec3;
    readonly radial: Vec3;
    readonly tangential: Vec3;
    readonly spin: Vec3;
    readonly hubVelocity: Vec3;
  },
): void {
  for (let k = 0; k < layout.radii.length; k++) {
    const i = blade.firstSection + k;
    const arm = scaled(at.radial, layout.radii[k]!);
    const place = addScaled(at.hub, arm, 1);
    const velocity = addScaled(at.hubVelocity, cross(at.spin, arm), 1);
    [out.x[i], out.y[i], out.z[i]] = place as [number, number, number];
    [out.u[i], out.v[i], out.w[i]] = velocity as [number, number, number];
    [out.tx[i], out.ty[i], out.tz[i]] = at.tangential as [number, number, number];
  }
}

/** Writes bound circulations to the edges of the blades' lattices. */
export function writeBladeEdges({ blades }: Rotor, circulation: Float64Array): void {
  for (const { bound, firstSection } of blades) {
    const n = bound.cols - 1;
    for (let c = 0; c < n; c++) {
      bound.spanwise[c] = circulation[firstSection + c]!;
      bound.spanwise[n + c] = -circulation[firstSection + c]!;
    }
    for (let c = 0; c <= n; c++) {
      const left = c > 0 ? circulation[firstSection + c - 1]! : 0;
      const right = c < n ? circulation[firstSection + c]! : 0;
      bound.streamwise[c] = left - right;
    }
  }
}
