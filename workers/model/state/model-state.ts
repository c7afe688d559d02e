// Everything that a simulation holds and marches: bodies, wakes, buffers. Not here: what changes it (march.ts).
import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import { createMutualInfluence, type MutualInfluence } from "../circulations/mutual-influence.ts";
import type { CirculationProblem } from "../circulations/solve-circulations.ts";
import type { Lattice, Points, Velocities } from "../kernel/index.ts";
import type { RotorLoads } from "../loads/rotor-loads.ts";
import { createWingLoads, type WingLoads } from "../loads/wing-loads.ts";
import { type FlightPath, flightPath, type Pose } from "../path/flight-path.ts";
import { createRotors, createSections, type Rotor, type Sections } from "../rotor/rotor.ts";
import { type Timing, timing } from "../timing.ts";
import { CORE_LENGTH_PER_RADIUS } from "../wake/core-growth.ts";
import type { CoreLaw, Wake } from "../wake/wake.ts";
import { createWing, type Wing } from "../wing/wing.ts";
import { wingGeometry } from "../wing/wing-geometry.ts";

/** The state of a simulation and its buffers. */
export interface ModelState {
  readonly inputs: Case;
  readonly times: Timing;
  readonly path: FlightPath;
  readonly wing: Wing;
  readonly rotors: readonly Rotor[];
  readonly sections: Sections;
  /** Wakes in a fixed order: the wing's, then blade by blade. */
  readonly wakes: readonly Wake[];
  /** Lattices by what is asked of them. */
  readonly lattices: {
    readonly wakes: readonly Lattice[];
    readonly blades: readonly Lattice[];
    readonly wingSelf: readonly Lattice[];
    readonly all: readonly Lattice[];
  };
  readonly influence: MutualInfluence;
  readonly problem: CirculationProblem;
  /** Air against the wing at the points of its geometry, m/s. */
  readonly wingFlow: Velocities;
  readonly wingPoints: Points;
  readonly sectionPoints: Points;
  readonly nodePoints: Points;
  readonly nodeVelocities: Velocities;
  readonly wingLoads: WingLoads;
  /** Speed of the air at the strips without the wing's own bound vortices, m/s. */
  readonly stripSpeeds: Float64Array;
  readonly rotorLoads: readonly RotorLoads[];
  readonly wingLaw: CoreLaw;
  readonly rotorLaws: readonly CoreLaw[];
  pose: Pose;
  step: number;
  passes: number;
}

const velocities = (n: number): Velocities => ({
  u: new Float64Array(n),
  v: new Float64Array(n),
  w: new Float64Array(n),
});

/** Where strips cluster: as the case says, or under its rotors. */
export function clustersOf({ wing, rotors }: Case): { atM: number; radiusM: number }[] {
  return wing.cluster_at_m === null
    ? rotors.map((rotor) => ({ atM: rotor.along_span_m, radiusM: rotor.radius_m }))
    : wing.cluster_at_m.map((cluster) => ({ atM: cluster.along_span_m, radiusM: cluster.radius_m }));
}

/** Rows of which the wing's wake has room: those kept, and those shed until the next cut. */
const wingWakeCapacity = (inputs: Case, times: Timing): number =>
  times.wingRows + times.wingCutEvery / inputs.numerics.wing_row_every + 1;

/**
 * The state before the first step.
 *
 * @param path the flight path, where it is to be another than the one of the inputs
 * @throws CASE_INVALID where the inputs contradict each other
 */
export function createState(inputs: Case, path: FlightPath = flightPath(inputs)): ModelState {
  const times = timing(inputs);
  const geometry = wingGeometry(inputs.wing, {
    clusters: clustersOf(inputs),
    wayPerStep: times.referenceSpeed * times.dtSeconds,
  });
  const { cores } = inputs.numerics;
  const chord = geometry.planform.meanChordM;
  const coreLength = (radius: number) => CORE_LENGTH_PER_RADIUS * cores.rotor_core_radii * radius;
  const wing = createWing(geometry, {
    surfaceCore: CORE_LENGTH_PER_RADIUS * cores.surface_core_chords * chord,
    wakeRows: wingWakeCapacity(inputs, times),
  });
  const body = { ...geometry, designApparent: path.designApparent };
  const rotors = createRotors(inputs, times, body, coreLength);
  const sections = createSections(rotors);
  const wakes = [wing.wake, ...rotors.flatMap((rotor) => rotor.blades.map((blade) => blade.wake))];
  const influence = createMutualInfluence(wing.panels, sections.count);
  return {
    inputs,
    times,
    path,
    wing,
    rotors,
    sections,
    wakes,
    influence,
    lattices: latticesOf(wing, rotors, wakes),
    problem: problemOf(inputs, { wing, rotors, sections, influence }),
    ...buffersOf(wing, sections, wakes),
    rotorLoads: rotors.map(() => ({ thrust: 0, torque: 0, force: new Float64Array(3) })),
    wingLaw: coreLaw(inputs, cores.wing_core_chords * chord),
    rotorLaws: rotors.map((rotor) => coreLaw(inputs, cores.rotor_core_radii * rotor.inputs.radius_m)),
    pose: path.poseAt(0),
    step: 0,
    passes: 0,
  };
}

function coreLaw({ air, numerics: { cores } }: Case, radiusM: number): CoreLaw {
  const { growth, growth_a1: a1, strain } = cores;
  return { radiusM, growth, viscosity: air.viscosity_m2ps, a1, strain };
}

function problemOf(
  { numerics }: Case,
  parts: Pick<CirculationProblem, "wing" | "rotors" | "sections" | "influence">,
): CirculationProblem {
  const { wing, sections } = parts;
  return {
    ...parts,
    wingRight: new Float64Array(wing.panels),
    outer: velocities(sections.count),
    flow: velocities(sections.count),
    circulation: new Float64Array(sections.count),
    relaxation: numerics.relaxation,
    right: new Float64Array(wing.panels),
  };
}

function buffersOf(wing: Wing, sections: Sections, wakes: readonly Wake[]) {
  const nodes = wakes.reduce((sum, { lattice }) => sum + lattice.capacityRows * lattice.cols, 0);
  const points = wing.points.x.length;
  return {
    wingFlow: velocities(points),
    wingPoints: { ...wing.points, n: points },
    sectionPoints: { x: sections.x, y: sections.y, z: sections.z, n: sections.count },
    nodePoints: { x: new Float64Array(nodes), y: new Float64Array(nodes), z: new Float64Array(nodes), n: 0 },
    nodeVelocities: velocities(nodes),
    wingLoads: createWingLoads(wing.geometry.strips),
    stripSpeeds: new Float64Array(wing.geometry.strips),
  };
}

function latticesOf(wing: Wing, rotors: readonly Rotor[], wakes: readonly Wake[]): ModelState["lattices"] {
  const blades = rotors.flatMap((rotor) => rotor.blades.map((blade) => blade.bound));
  const free = wakes.map((wake) => wake.lattice);
  return { wakes: free, blades, wingSelf: [wing.boundSelf], all: [wing.bound, ...blades, ...free] };
}
