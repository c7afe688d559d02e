import { inGround, type Rotor } from "../rotor/rotor.ts";
import type { ModelState } from "../state/model-state.ts";
import { addScaled, dot, norm, scaled, unit, type Vec3 } from "../vec3.ts";
import { windSpeed } from "../wind.ts";
import { hasLiftAndDrag, hasTether } from "./channels.ts";
import { addWake, clearMonitors, type WakeMonitors } from "./wake-monitors.ts";

const vec = (a: Float64Array, at = 0): Vec3 => [a[at]!, a[at + 1]!, a[at + 2]!];

/** Writes the quantities of the last step in the order of the channels; `room` is for passing. */
export function takeSample(state: ModelState, room: WakeMonitors, out: Float64Array): void {
  let at = takeWing(state, out);
  for (let i = 0; i < state.rotors.length; i++) at = takeRotor(state, i, out, at);
  at = takeStrips(state, out, at);
  takeMonitors(state, room, out, at);
}

function takeWing(state: ModelState, out: Float64Array): number {
  const { inputs, wing, pose, wingLoads, times } = state;
  const { areaM2, spanM } = wing.geometry.planform;
  const push = 0.5 * inputs.air.density_kgpm3 * times.referenceSpeed ** 2 * areaM2;
  const normal = inGround(wing.geometry.chordNormal, pose);
  const force = vec(wingLoads.force);
  let at = 0;
  out[at++] = dot(force, normal) / push;
  if (hasLiftAndDrag(inputs)) {
    out[at++] = dot(force, pose.normal) / push;
    out[at++] = -dot(force, pose.forward) / push;
  }
  out[at++] = dot(vec(wingLoads.moment), pose.forward) / (push * spanM);
  if (hasTether(inputs)) {
    const all = state.rotorLoads.reduce((sum, rotor) => addScaled(sum, vec(rotor.force), 1), force);
    out[at++] = dot(all, tetherDirection(state)) / push;
  }
  out[at++] = dot(vec(wingLoads.pressureForce), normal) / push;
  return at;
}

/** From the anchor, on the circle's axis upwind, to the wing. */
function tetherDirection({ inputs: { path }, pose }: ModelState): Vec3 {
  if (path.kind !== "circle" || path.tether_length_m === null) return pose.normal;
  const along = Math.sqrt(path.tether_length_m ** 2 - path.radius_m ** 2);
  return unit(addScaled(scaled(pose.normal, along), pose.span, path.radius_m));
}

function takeRotor(state: ModelState, index: number, out: Float64Array, from: number): number {
  const rotor = state.rotors[index]!;
  const { thrust, torque } = state.rotorLoads[index]!;
  let at = from;
  for (const speed of [state.times.referenceSpeed, hubSpeed(state, rotor)]) {
    const radius = rotor.inputs.radius_m;
    const push = 0.5 * state.inputs.air.density_kgpm3 * speed ** 2 * Math.PI * radius ** 2;
    out[at++] = thrust / push;
    out[at++] = torque / (push * radius);
    out[at++] = (torque * rotor.omega) / (push * speed);
  }
  return at;
}

/** Speed of the undisturbed air against the hub, m/s. */
function hubSpeed({ inputs, step, times }: ModelState, { hub, hubVelocity }: Rotor): number {
  const wind = windSpeed(inputs.wind, hub[2]!, step * times.dtSeconds);
  return norm([wind - hubVelocity[0]!, -hubVelocity[1]!, -hubVelocity[2]!]);
}

function takeStrips(state: ModelState, out: Float64Array, from: number): number {
  const { wing, pose, wingLoads, times, inputs } = state;
  const { strips, stripAreas } = wing.geometry;
  const normal = inGround(wing.geometry.chordNormal, pose);
  const pressure = 0.5 * inputs.air.density_kgpm3 * times.referenceSpeed ** 2;
  let at = from;
  for (let j = 0; j < strips; j++) {
    out[at++] = dot(vec(wingLoads.stripForces, 3 * j), normal) / (pressure * stripAreas[j]!);
    out[at++] = state.stripSpeeds[j]!;
  }
  return at;
}

function takeMonitors(state: ModelState, room: WakeMonitors, out: Float64Array, from: number): void {
  const { inputs, times, step } = state;
  clearMonitors(room);
  const windAt = (z: number) => windSpeed(inputs.wind, z, step * times.dtSeconds);
  for (const wake of state.wakes) addWake(wake, windAt, room);
  const values = [
    room.speedMax,
    Math.sqrt(room.speedSquares / Math.max(1, room.nodes)),
    room.speedMax * times.dtSeconds,
    room.segmentMax,
    room.filamentLength,
    inputs.air.density_kgpm3 * norm(vec(room.area)),
    room.nodes,
    state.passes,
  ];
  out.set(values, from);
}
