import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import type { ChannelInfo } from "../../../orchestrator/contract/index.ts";

/** Quantities to which coefficients refer. */
export interface Reference {
  /** m/s, m², m, kg/m³. */
  readonly speed: number;
  readonly areaM2: number;
  readonly spanM: number;
  readonly density: number;
}

/** Whether lift and drag mean something: only where the flight is straight. */
export const hasLiftAndDrag = (inputs: Case): boolean => inputs.path.kind === "straight";

/** Whether a tether's direction is known. */
export const hasTether = (inputs: Case): boolean => inputs.path.kind === "circle";

/** Number of a strip as channels write it, left tip first, from 1, all with the same count of digits. */
const stripNumber = (j: number, strips: number): string =>
  String(j + 1).padStart(Math.max(2, String(strips).length), "0");

/** Every channel of a case, in the order of its samples. */
export function channelList(inputs: Case, reference: Reference): ChannelInfo[] {
  return [
    ...wingChannels(inputs, reference),
    ...inputs.rotors.flatMap((rotor, i) => rotorChannels(`rotor${i + 1}`, rotor, reference)),
    ...stripChannels(inputs.wing.spanwise_panels, reference),
    ...monitorChannels,
  ];
}

function wingChannels(inputs: Case, { speed, areaM2, spanM, density }: Reference): ChannelInfo[] {
  const by = `by ½ρV²S, ρ = ${short(density)} kg/m³, V = ${short(speed)} m/s (design apparent wind), S = ${short(areaM2)} m²`;
  const load = (name: string, what: string): ChannelInfo => ({ name, unit: "1", what, role: "load" });
  const list = [load("CN", `Force on the wing along its own normal at mid span, ${by}`)];
  if (hasLiftAndDrag(inputs)) {
    list.push(
      load("CL", `Lift of the wing, square to the flight path, ${by}`),
      load("CD", `Induced drag of the wing, against the flight path, no friction, ${by}`),
    );
  }
  list.push(
    load(
      "CRoll",
      `Moment of the wing about the flight direction, right tip down positive, ${by} and b = ${short(spanM)} m`,
    ),
  );
  if (hasTether(inputs)) {
    list.push(load("CTether", `Force on wing and rotors along the tether, away from its anchor, ${by}`));
  }
  list.push({
    name: "CN.pressure",
    unit: "1",
    what: `CN by the unsteady Bernoulli equation, a second route to the same number, ${by}`,
    role: "monitor",
  });
  return list;
}

function rotorChannels(
  name: string,
  { radius_m: radius, name: called, operation }: Case["rotors"][number],
  { speed, density }: Reference,
): ChannelInfo[] {
  const fixed = `by the design apparent wind of ${short(speed)} m/s`;
  const local = "by the undisturbed air at the hub at that moment";
  const of = `${called}, ${operation}, R = ${short(radius)} m, ρ = ${short(density)} kg/m³`;
  const load = (symbol: string, what: string): ChannelInfo => ({
    name: `${name}.${symbol}`,
    unit: "1",
    what: `${what} (${of})`,
    role: "load",
  });
  return [
    load("CT", `Thrust by ½ρV²πR², ${fixed}`),
    load("CQ", `Torque by ½ρV²πR³, ${fixed}`),
    load("CP", `Power by ½ρV³πR², ${fixed}`),
    load("CTlocal", `Thrust by ½ρV²πR², ${local}`),
    load("CQlocal", `Torque by ½ρV²πR³, ${local}`),
    load("CPlocal", `Power by ½ρV³πR², ${local}`),
  ];
}

function stripChannels(strips: number, { speed, density }: Reference): ChannelInfo[] {
  return Array.from({ length: strips }, (_, j) => {
    const number = stripNumber(j, strips);
    const place = `strip ${j + 1} of ${strips}, left tip first`;
    const channels: ChannelInfo[] = [
      {
        name: `strip${number}.CN`,
        unit: "1",
        what: `Normal force of ${place}, by ½ρV² and its own area, ρ = ${short(density)} kg/m³, V = ${short(speed)} m/s`,
        role: "load",
      },
      {
        name: `strip${number}.speed`,
        unit: "m/s",
        what: `Speed of the air at ${place}, wakes and rotors included, the wing's own bound vortices not`,
        role: "load",
      },
    ];
    return channels;
  }).flat();
}

const monitor = (name: string, unit: string, what: string): ChannelInfo => ({
  name,
  unit,
  what,
  role: "monitor",
});

const monitorChannels: readonly ChannelInfo[] = [
  monitor("wake.speedMax", "m/s", "Largest speed that is induced at a wake node"),
  monitor("wake.speedRms", "m/s", "Root mean square of the speed induced at the wake nodes"),
  monitor(
    "wake.displacementMax",
    "m",
    "Longest way of a wake node through the undisturbed air in the next step",
  ),
  monitor("wake.segmentMax", "m", "Longest filament segment of the wakes"),
  monitor("wake.filamentLength", "m", "Length of all filaments of the wakes together"),
  monitor(
    "wake.impulse",
    "N s",
    "Size of the wakes' impulse, ρ times the sum of circulation times vector area of the rings",
  ),
  monitor("wake.nodes", "1", "Nodes of the wakes"),
  monitor(
    "solver.passes",
    "1",
    "Passes until wing and blade circulations fitted each other, parts of a pass included",
  ),
];

/** A number with four digits, as people write it. */
const short = (x: number): string => String(Number(x.toPrecision(4)));
