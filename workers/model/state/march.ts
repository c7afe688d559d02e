import { writeMutualInfluence } from "../circulations/mutual-influence.ts";
import { solveCirculations } from "../circulations/solve-circulations.ts";
import { dropRows, type PairKernel, typescriptKernel, type Velocities } from "../kernel/index.ts";
import { rotorLoads } from "../loads/rotor-loads.ts";
import { wingLoads } from "../loads/wing-loads.ts";
import { placeRotor, type Rotor, writeBladeEdges } from "../rotor/rotor.ts";
import { setFirstCores, writeCores } from "../wake/core-growth.ts";
import {
  convect,
  feedFirstRing,
  holdFirstRow,
  measureFirstLengths,
  shedRow,
  storeVelocities,
  writeEdges,
} from "../wake/wake.ts";
import { windSpeed } from "../wind.ts";
import { placeWing, writeWingEdges } from "../wing/wing.ts";
import { checkFinite } from "./check-finite.ts";
import type { ModelState } from "./model-state.ts";

/**
 * One time step, in place: wakes move with the velocities of the step before, bodies move on, rows are shed and cut, the
 * circulations are found, loads and the wakes' new velocities follow.
 *
 * @throws NON_FINITE naming quantity and step
 */
export function march(state: ModelState, kernel: PairKernel): void {
  state.step += 1;
  const shedsWing = (state.step - 1) % state.inputs.numerics.wing_row_every === 0;
  for (const wake of state.wakes) {
    const held = wake === state.wing.wake && !shedsWing;
    convect(wake, state.times.dtSeconds, held ? 1 : 0);
  }
  placeBodies(state);
  shed(state, shedsWing);
  cut(state);
  dressWakes(state);
  outerVelocities(state, kernel);
  solve(state);
  wingVelocities(state, kernel);
  loads(state);
  moveOn(state, kernel);
  checkFinite(state);
}

const timeOf = (state: ModelState): number => state.step * state.times.dtSeconds;

function placeBodies(state: ModelState): void {
  state.pose = state.path.poseAt(timeOf(state));
  placeWing(state.wing, state.pose);
  for (const rotor of state.rotors) placeRotor(rotor, state.pose, timeOf(state), state.sections);
}

function shed(state: ModelState, shedsWing: boolean): void {
  const { wing, rotors, problem } = state;
  const { chordwise, strips } = wing.geometry;
  if (shedsWing) shedRow(wing.wake, state.step);
  holdFirstRow(wing.wake, wing.bound, chordwise * (strips + 1));
  feedFirstRing(wing.wake, wing.circulation, (chordwise - 1) * strips);
  for (const { blades } of rotors) {
    for (const { wake, bound, firstSection } of blades) {
      shedRow(wake, state.step);
      holdFirstRow(wake, bound, bound.cols);
      feedFirstRing(wake, problem.circulation, firstSection);
    }
  }
}

function cut(state: ModelState): void {
  const { numerics } = state.inputs;
  if (state.step % state.times.wingCutEvery === 0) dropRows(state.wing.wake.lattice, state.times.wingRows);
  if (state.step % numerics.truncate_every !== 0) return;
  for (const { blades } of state.rotors) {
    for (const { wake } of blades) dropRows(wake.lattice, numerics.rotor_wake_rows);
  }
}

function dressWakes(state: ModelState): void {
  const { dtSeconds } = state.times;
  for (const wake of state.wakes) {
    writeEdges(wake);
    measureFirstLengths(wake);
  }
  writeCores(state.wing.wake, state.wingLaw, state.step, dtSeconds);
  state.rotors.forEach((rotor, i) => {
    for (const { wake } of rotor.blades) writeCores(wake, state.rotorLaws[i]!, state.step, dtSeconds);
  });
  setBladeCores(state, (rotor) => rotor.boundCore);
}

/** Air against the bodies by wind, motion and wakes: at all points of the wing and at the sections. */
function outerVelocities(state: ModelState, kernel: PairKernel): void {
  const { wing, wingFlow, sections, problem, sectionPoints } = state;
  const wakes = state.lattices.wakes;
  relativeWind(state);
  // The wing feels the first row of its own wake with the core of its own aft edge, which lies there.
  setFirstCores(wing.wake, wing.selfCore);
  kernel.induce(wakes, state.wingPoints, wingFlow);
  setFirstCores(wing.wake, wing.surfaceCore);
  for (let i = 0; i < sections.count; i++) {
    problem.outer.u[i] = windSpeed(state.inputs.wind, sections.z[i]!, timeOf(state)) - sections.u[i]!;
    problem.outer.v[i] = -sections.v[i]!;
    problem.outer.w[i] = -sections.w[i]!;
  }
  if (sections.count === 0) return;
  // The blades feel first rows likewise with the core that the rings before them have there.
  setBladeCores(state, (rotor) => rotor.selfCore);
  kernel.induce(wakes, sectionPoints, problem.outer);
  setBladeCores(state, (rotor) => rotor.boundCore);
}

function setBladeCores({ rotors }: ModelState, coreOf: (rotor: Rotor) => number): void {
  for (const rotor of rotors) for (const { wake } of rotor.blades) setFirstCores(wake, coreOf(rotor));
}

/** Wind less the body's own velocity at the points of the wing. */
function relativeWind({ wing, wingFlow, pose, inputs, step, times }: ModelState): void {
  const { points } = wing;
  const [px, py, pz] = pose.position;
  const [vx, vy, vz] = pose.velocity;
  const [ox, oy, oz] = pose.spin;
  for (let i = 0; i < points.x.length; i++) {
    const rx = points.x[i]! - px;
    const ry = points.y[i]! - py;
    const rz = points.z[i]! - pz;
    wingFlow.u[i] = windSpeed(inputs.wind, points.z[i]!, step * times.dtSeconds) - vx - (oy * rz - oz * ry);
    wingFlow.v[i] = -vy - (oz * rx - ox * rz);
    wingFlow.w[i] = -vz - (ox * ry - oy * rx);
  }
}

function solve(state: ModelState): void {
  const { wing, wingFlow, problem } = state;
  for (let i = 0; i < wing.panels; i++) {
    problem.wingRight[i] = -(
      wingFlow.u[i]! * wing.normals.x[i]! +
      wingFlow.v[i]! * wing.normals.y[i]! +
      wingFlow.w[i]! * wing.normals.z[i]!
    );
  }
  wing.circulationTwoBefore.set(wing.circulationBefore);
  wing.circulationBefore.set(wing.circulation);
  if (state.sections.count > 0) writeMutualInfluence(state.influence, wing, state.rotors, state.sections);
  state.passes = solveCirculations(problem);
  writeWingEdges(wing);
  for (const rotor of state.rotors) writeBladeEdges(rotor, problem.circulation);
}

/**
 * Adds what the bound rings induce at the points of the wing. Its own lattice goes through the exact kernel, whichever the
 * run has: points lie on its filaments.
 */
function wingVelocities(state: ModelState, kernel: PairKernel): void {
  if (state.sections.count > 0) kernel.induce(state.lattices.blades, state.wingPoints, state.wingFlow);
  stripSpeeds(state);
  typescriptKernel.induce(state.lattices.wingSelf, state.wingPoints, state.wingFlow);
}

/** Speed of the mean velocity over the control points of each strip. */
function stripSpeeds({ wing, wingFlow, stripSpeeds }: ModelState): void {
  const { strips, chordwise } = wing.geometry;
  for (let j = 0; j < strips; j++) {
    let u = 0;
    let v = 0;
    let w = 0;
    for (let i = j; i < wing.panels; i += strips) {
      u += wingFlow.u[i]!;
      v += wingFlow.v[i]!;
      w += wingFlow.w[i]!;
    }
    stripSpeeds[j] = Math.sqrt(u * u + v * v + w * w) / chordwise;
  }
}

function loads(state: ModelState): void {
  const { inputs, wing, wingFlow, pose, step, times, sections, problem } = state;
  const at = {
    density: inputs.air.density_kgpm3,
    dtSeconds: times.dtSeconds,
    step,
    flow: wingFlow,
    reference: pose.position as readonly [number, number, number],
  };
  wingLoads(wing, at, state.wingLoads);
  state.rotors.forEach((rotor, i) => {
    rotorLoads(rotor, sections, problem.flow, inputs.air.density_kgpm3, state.rotorLoads[i]!);
  });
}

/** Velocities with which the wakes move on. */
function moveOn(state: ModelState, kernel: PairKernel): void {
  const { nodePoints: points, nodeVelocities: found } = state;
  points.n = gatherNodes(state);
  clear(found, points.n);
  kernel.induce(state.lattices.all, points, found);
  for (let i = 0; i < points.n; i++) {
    found.u[i] = found.u[i]! + windSpeed(state.inputs.wind, points.z[i]!, timeOf(state));
  }
  let from = 0;
  for (const wake of state.wakes) {
    storeVelocities(wake, found, from);
    from += wake.lattice.rows * wake.lattice.cols;
  }
}

/** Copies the nodes of all wakes into one batch of points; returns how many there are. */
function gatherNodes({ wakes, nodePoints }: ModelState): number {
  let at = 0;
  for (const { lattice } of wakes) {
    const nodes = lattice.rows * lattice.cols;
    for (let i = 0; i < nodes; i++, at++) {
      nodePoints.x[at] = lattice.x[i]!;
      nodePoints.y[at] = lattice.y[i]!;
      nodePoints.z[at] = lattice.z[i]!;
    }
  }
  return at;
}

function clear(velocities: Velocities, n: number): void {
  velocities.u.fill(0, 0, n);
  velocities.v.fill(0, 0, n);
  velocities.w.fill(0, 0, n);
}
