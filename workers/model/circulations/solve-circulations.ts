import type { Rotor, Sections } from "../rotor/rotor.ts";
import { solveWing, type Wing } from "../wing/wing.ts";
import type { MutualInfluence } from "./mutual-influence.ts";

/** Passes after which the iteration stops whatever the change is; what is left then shows in the monitor. */
const PASSES_MAX = 80;
/** Largest change of a blade circulation at which it has converged, over the largest circulation. */
const TOLERANCE = 1e-6;

/** What the bodies feel of everything but bound rings, and where results go. */
export interface CirculationProblem {
  readonly wing: Wing;
  readonly rotors: readonly Rotor[];
  readonly sections: Sections;
  readonly influence: MutualInfluence;
  /** Minus the normal velocity at the wing's control points by wind, motion and wakes, m/s. */
  readonly wingRight: Float64Array;
  /** Velocity of the air against the sections by wind, motion and wakes, m/s. */
  readonly outer: Velocities;
  /** The same with the bound rings added: result, m/s. */
  readonly flow: Velocities;
  /** Circulations of the sections: start value and result, m²/s. */
  readonly circulation: Float64Array;
  readonly relaxation: number;
  /** Room, shape as wingRight. */
  readonly right: Float64Array;
}

interface Velocities {
  readonly u: Float64Array;
  readonly v: Float64Array;
  readonly w: Float64Array;
}

/**
 * Circulations of wing and blades that fit each other: impermeability on the wing, Γ = ½ W c cl(α) on the blades, by
 * Gauss–Seidel passes over the sections, the wing solved anew in each. A pass moves a section by relaxation / (1 + its gain on
 * itself) of what its flow asks for.
 *
 * @returns passes done, whole ones and the part of the last one that was needed (by its rate of convergence); 0 without rotors
 */
export function solveCirculations(problem: CirculationProblem): number {
  const { sections, wing } = problem;
  if (sections.count === 0) {
    solveWing(wing, problem.wingRight);
    return 0;
  }
  let before = Infinity;
  for (let pass = 1; pass <= PASSES_MAX; pass++) {
    solveWingAmongBlades(problem);
    const change = passOverSections(problem);
    if (change <= TOLERANCE) {
      solveWingAmongBlades(problem);
      for (let i = 0; i < sections.count; i++) writeFlow(problem, i);
      return pass - 1 + partOfLastPass(before, change);
    }
    before = change;
  }
  solveWingAmongBlades(problem);
  for (let i = 0; i < sections.count; i++) writeFlow(problem, i);
  return PASSES_MAX;
}

/** A whole number would jump between values while nothing happens; the monitors want a smooth one. */
function partOfLastPass(before: number, change: number): number {
  if (!(before < Infinity) || change <= 0) return 1;
  return Math.min(1, Math.max(0, Math.log(before / TOLERANCE) / Math.log(before / change)));
}

function solveWingAmongBlades({ wing, influence, wingRight, right, circulation }: CirculationProblem): void {
  const n = circulation.length;
  for (let i = 0, at = 0; i < wing.panels; i++) {
    let sum = 0;
    for (let j = 0; j < n; j++, at++) sum += influence.bladeOnWing[at]! * circulation[j]!;
    right[i] = wingRight[i]! - sum;
  }
  solveWing(wing, right);
}

/** One pass, in place; returns the largest change that was wanted, over the largest circulation. */
function passOverSections(problem: CirculationProblem): number {
  let change = 0;
  let largest = 1e-12;
  for (const rotor of problem.rotors) {
    for (const { firstSection } of rotor.blades) {
      for (let k = 0; k < rotor.layout.radii.length; k++) {
        const i = firstSection + k;
        writeFlow(problem, i);
        const wanted = sectionCirculation(rotor, k, i, problem);
        const now = problem.circulation[i]!;
        change = Math.max(change, Math.abs(wanted - now));
        problem.circulation[i] =
          now + (problem.relaxation * (wanted - now)) / (1 + selfGain(rotor, k, i, problem));
        largest = Math.max(largest, Math.abs(problem.circulation[i]!));
      }
    }
  }
  return change / largest;
}

/**
 * By how much a section's own circulation takes back what its flow asks for, about:  ½ c · 2π · |velocity by its ring of 1|.
 * Finely divided blades have gains far above 1, at which plain passes would diverge.
 */
function selfGain(rotor: Rotor, k: number, i: number, { influence, sections }: CirculationProblem): number {
  const at = i * sections.count + i;
  const { u, v, w } = influence.bladeOnBlade;
  return Math.PI * rotor.layout.chords[k]! * Math.sqrt(u[at]! ** 2 + v[at]! ** 2 + w[at]! ** 2);
}

function writeFlow(
  { influence, sections, wing, outer, flow, circulation }: CirculationProblem,
  i: number,
): void {
  const n = sections.count;
  const m = wing.panels;
  const { bladeOnBlade, wingOnBlade } = influence;
  let u = outer.u[i]!;
  let v = outer.v[i]!;
  let w = outer.w[i]!;
  for (let j = 0, at = i * n; j < n; j++, at++) {
    const gamma = circulation[j]!;
    u += bladeOnBlade.u[at]! * gamma;
    v += bladeOnBlade.v[at]! * gamma;
    w += bladeOnBlade.w[at]! * gamma;
  }
  for (let j = 0, at = i * m; j < m; j++, at++) {
    const gamma = wing.circulation[j]!;
    u += wingOnBlade.u[at]! * gamma;
    v += wingOnBlade.v[at]! * gamma;
    w += wingOnBlade.w[at]! * gamma;
  }
  flow.u[i] = u;
  flow.v[i] = v;
  flow.w[i] = w;
}

/**
 * Circulation that the polar gives for the flow at a section, positive from hub to tip.
 *
 *   φ = atan2(v_a, v_t),  α = s (φ - θ),  Γ = - turn · s · ½ W c cl(α)
 */
function sectionCirculation(rotor: Rotor, k: number, i: number, problem: CirculationProblem): number {
  const { sections, flow } = problem;
  const axis = rotor.axis;
  const axial = -(flow.u[i]! * axis[0]! + flow.v[i]! * axis[1]! + flow.w[i]! * axis[2]!);
  const around = -(
    flow.u[i]! * sections.tx[i]! +
    flow.v[i]! * sections.ty[i]! +
    flow.w[i]! * sections.tz[i]!
  );
  const alpha = rotor.sense * (Math.atan2(axial, around) - rotor.layout.pitches[k]!);
  const speed = Math.sqrt(axial * axial + around * around);
  return -rotor.turn * rotor.sense * 0.5 * speed * rotor.layout.chords[k]! * rotor.polar.cl(alpha);
}
