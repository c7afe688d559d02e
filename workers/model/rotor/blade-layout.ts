import type { RotorInputs } from "../../../orchestrator/contract/case-schema.ts";
import { AppError } from "../../../orchestrator/contract/index.ts";
import { radians } from "../vec3.ts";
import { interpolate } from "../wing/planform.ts";
import type { SectionPolar } from "./section-polar.ts";

/** Chord and pitch of one blade: at the edges of its sections and at their middles. */
export interface BladeLayout {
  /** Radii of the edges, m, from hub to tip, shape [sections + 1]; chord, m, and pitch against the rotor plane, rad, there. */
  readonly edgeRadii: Float64Array;
  readonly edgeChords: Float64Array;
  readonly edgePitches: Float64Array;
  /** The same where the sections are evaluated, shape [sections]. */
  readonly radii: Float64Array;
  readonly chords: Float64Array;
  readonly pitches: Float64Array;
}

/** Largest chord of the automatic layout, in tip radii. */
const WIDEST = 0.45;
/**
 * Axial induction factors for which it is laid out. A turbine's is kept below Betz's 1/3, for a thrust coefficient of 0.64
 * that the method can bear; a propeller's is that of a light load. Common practice, no source.
 */
const INDUCTION = { generating: 0.2, propelling: 0.1 };

/**
 * Lays out a blade: given stations, or one of even induction by momentum theory without losses for the
 * design tip-speed ratio.
 *
 *   generating  tan φ = (1-a)/λr,  chord from  B ½ W² c cl cos φ = 4πr V² a (1-a)
 *   propelling  tan φ = (1+a)/λr,  chord from  B ½ W² c cl cos φ = 4πr V² a (1+a)
 *
 * Edges and evaluation radii follow the cosine rule of lifting lines, so that the tip is finely divided.
 *
 * @throws CASE_INVALID where hub and tip or the stations are out of order
 * @see Glauert (1935), Airplane propellers, in Durand, Aerodynamic Theory IV (from memory)
 */
export function bladeLayout(rotor: RotorInputs, polar: SectionPolar, field: string): BladeLayout {
  const { sections, radius_m: tip, hub_radius_m: hub } = rotor;
  checkRadii(rotor, field);
  const radiusAt = (angle: number) => hub + ((tip - hub) * (1 - Math.cos(angle))) / 2;
  const edgeRadii = Float64Array.from({ length: sections + 1 }, (_, i) => radiusAt((i * Math.PI) / sections));
  const radii = Float64Array.from({ length: sections }, (_, i) => radiusAt(((i + 0.5) * Math.PI) / sections));
  const chordAt = (r: number) => stationValue(rotor, r, "chord_m") ?? designChord(rotor, r);
  const pitchAt = (r: number) =>
    radians(rotor.pitch_change_deg) +
    (stationPitch(rotor, r) ?? designFlow(rotor, r) - sense(rotor) * polar.alphaForCl(rotor.design_cl));
  return {
    edgeRadii,
    edgeChords: edgeRadii.map(chordAt),
    edgePitches: edgeRadii.map(pitchAt),
    radii,
    chords: radii.map(chordAt),
    pitches: radii.map(pitchAt),
  };
}

/** 1 where the flow drives the blades, -1 where the blades drive the flow: α = sense (φ - pitch). */
export const sense = (rotor: Pick<RotorInputs, "operation">): 1 | -1 =>
  rotor.operation === "generating" ? 1 : -1;

function designFlow(rotor: RotorInputs, r: number): number {
  const a = INDUCTION[rotor.operation];
  const local = (rotor.design_tip_speed_ratio * r) / rotor.radius_m;
  return Math.atan2(1 - sense(rotor) * a, local);
}

function designChord(rotor: RotorInputs, r: number): number {
  const a = INDUCTION[rotor.operation];
  const axial = 1 - sense(rotor) * a;
  const flow = designFlow(rotor, r);
  const speedSquared = (axial / Math.sin(flow)) ** 2;
  const chord =
    (8 * Math.PI * r * a * axial) / (rotor.blades * rotor.design_cl * speedSquared * Math.cos(flow));
  return Math.min(WIDEST * rotor.radius_m, chord);
}

function stationPitch(rotor: RotorInputs, r: number): number | undefined {
  const degrees = stationValue(rotor, r, "pitch_deg");
  return degrees === undefined ? undefined : radians(degrees);
}

function stationValue(rotor: RotorInputs, r: number, key: "chord_m" | "pitch_deg"): number | undefined {
  if (rotor.stations === null) return undefined;
  return interpolate(
    rotor.stations.map((station) => station.radius_fraction),
    rotor.stations.map((station) => station[key]),
    r / rotor.radius_m,
  );
}

function checkRadii({ hub_radius_m: hub, radius_m: tip, stations }: RotorInputs, field: string): void {
  if (hub >= tip) {
    throw new AppError("CASE_INVALID", `blades from ${hub} m to ${tip} m have no length`, {
      where: `${field}.hub_radius_m`,
      fix: `Give a hub radius below the tip radius of ${tip} m.`,
    });
  }
  const late = (stations ?? []).findIndex(
    (station, i) => i > 0 && station.radius_fraction <= stations![i - 1]!.radius_fraction,
  );
  if (late > 0) {
    throw new AppError("CASE_INVALID", `station ${late + 1} of a blade is not outside the one before`, {
      where: `${field}.stations`,
      fix: "Give the stations with rising radius_fraction.",
    });
  }
}
