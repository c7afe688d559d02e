import type { Wing } from "../wing/wing.ts";
import { LAST_RING_ON_WING, type VectorArray } from "../wing/wing-geometry.ts";

/** Force on the wing by two routes, ground frame; strips shape [strips * 3]. */
export interface WingLoads {
  /** Kutta–Joukowski on bound segments, plus the unsteady part, N. */
  readonly force: Float64Array;
  /** Its moment about the reference point, N m. */
  readonly moment: Float64Array;
  /** Pressure by the unsteady Bernoulli equation, N. */
  readonly pressureForce: Float64Array;
  /** Force by strip, N. */
  readonly stripForces: Float64Array;
}

/** Room for the loads of a wing of so many strips. */
export const createWingLoads = (strips: number): WingLoads => ({
  force: new Float64Array(3),
  moment: new Float64Array(3),
  pressureForce: new Float64Array(3),
  stripForces: new Float64Array(3 * strips),
});

/** What the loads need besides the wing. */
export interface WingFlow {
  readonly density: number;
  readonly dtSeconds: number;
  readonly step: number;
  /** Velocity of the air against the wing at the points of its geometry, everything included, m/s. */
  readonly flow: { readonly u: Float64Array; readonly v: Float64Array; readonly w: Float64Array };
  /** Reference point of the moment, m. */
  readonly reference: readonly [number, number, number];
}

/**
 * Force on the wing.
 *
 *   F = Σ ρ Γ V × dl over spanwise and chordwise bound segments  +  Σ ρ ∂Γ/∂t A n over rings
 *   F = Σ ρ [V · (τ_c ∂Γ/∂c + τ_s ∂Γ/∂s) + ∂Γ/∂t] A n over panels (Bernoulli)
 *
 * The two share circulations but not the places where velocities are taken. Three quarters of the last ring lie on the wing,
 * and of its chordwise segments and its unsteady part only those count; the second route sees the same as Γ at a panel's
 * middle, ¼ of the ring that ends and ¾ of the ring that begins on it.
 *
 * Limits: the first includes the suction at the leading edge, the second, a pressure normal to the panels, does not; so only
 * components along the normal of a nearly flat wing can be compared.
 *
 * @see Katz & Plotkin, Low-Speed Aerodynamics, §13.12 (both routes, from memory)
 */
export function wingLoads(wing: Wing, at: WingFlow, out: WingLoads): void {
  for (const array of [out.force, out.moment, out.pressureForce, out.stripForces]) array.fill(0);
  spanwiseForces(wing, at, out);
  chordwiseForces(wing, at, out);
  panelForces(wing, at, out);
}

/**
 * ∂Γ/∂t of ring i, m²/s²: second-order backward difference, first-order until there are two values before; zero at the
 * first step, where the impulsive start has no rate.
 */
function circulationRate(wing: Wing, i: number, { step, dtSeconds }: WingFlow): number {
  const now = wing.circulation[i]!;
  const before = wing.circulationBefore[i]!;
  if (step < 2) return 0;
  if (step < 3) return (now - before) / dtSeconds;
  return (1.5 * now - 2 * before + 0.5 * wing.circulationTwoBefore[i]!) / dtSeconds;
}

function spanwiseForces(wing: Wing, at: WingFlow, out: WingLoads): void {
  const { panels, circulation } = wing;
  const { strips } = wing.geometry;
  for (let i = 0; i < panels; i++) {
    const gamma = circulation[i]! - (i >= strips ? circulation[i - strips]! : 0);
    addSegment(
      wing,
      at,
      out,
      { point: panels + i, length: wing.spanwiseLengths, edge: i, gamma },
      i % strips,
      -1,
    );
  }
}

function chordwiseForces(wing: Wing, at: WingFlow, out: WingLoads): void {
  const { panels, circulation } = wing;
  const { strips, chordwise } = wing.geometry;
  for (let k = 0, edge = 0; k < chordwise; k++) {
    for (let j = 0; j <= strips; j++, edge++) {
      const left = j > 0 ? circulation[k * strips + j - 1]! : 0;
      const right = j < strips ? circulation[k * strips + j]! : 0;
      const segment = {
        point: 2 * panels + edge,
        length: wing.chordwiseLengths,
        edge,
        gamma: left - right,
      };
      addSegment(wing, at, out, segment, j > 0 ? j - 1 : -1, j < strips ? j : -1);
    }
  }
}

/** Adds the force of one segment; where it borders two strips, half of it to each. */
function addSegment(
  wing: Wing,
  { flow, density, reference }: WingFlow,
  out: WingLoads,
  segment: { point: number; length: VectorArray; edge: number; gamma: number },
  strip: number,
  other: number,
): void {
  const { point, length, edge } = segment;
  const k = density * segment.gamma;
  const u = flow.u[point]!;
  const v = flow.v[point]!;
  const w = flow.w[point]!;
  const x = length.x[edge]!;
  const y = length.y[edge]!;
  const z = length.z[edge]!;
  const fx = k * (v * z - w * y);
  const fy = k * (w * x - u * z);
  const fz = k * (u * y - v * x);
  addForce(wing, out, { fx, fy, fz, point, reference });
  const share = strip >= 0 && other >= 0 ? 0.5 : 1;
  if (strip >= 0) addToStrip(out, strip, share * fx, share * fy, share * fz);
  if (other >= 0) addToStrip(out, other, share * fx, share * fy, share * fz);
}

function addToStrip({ stripForces }: WingLoads, strip: number, fx: number, fy: number, fz: number): void {
  stripForces[3 * strip] = stripForces[3 * strip]! + fx;
  stripForces[3 * strip + 1] = stripForces[3 * strip + 1]! + fy;
  stripForces[3 * strip + 2] = stripForces[3 * strip + 2]! + fz;
}

function addForce(
  wing: Wing,
  { force, moment }: WingLoads,
  at: { fx: number; fy: number; fz: number; point: number; reference: readonly [number, number, number] },
): void {
  const x = wing.points.x[at.point]! - at.reference[0];
  const y = wing.points.y[at.point]! - at.reference[1];
  const z = wing.points.z[at.point]! - at.reference[2];
  force[0] = force[0]! + at.fx;
  force[1] = force[1]! + at.fy;
  force[2] = force[2]! + at.fz;
  moment[0] = moment[0]! + y * at.fz - z * at.fy;
  moment[1] = moment[1]! + z * at.fx - x * at.fz;
  moment[2] = moment[2]! + x * at.fy - y * at.fx;
}

/** The unsteady part of the first route, and the whole of the second. */
function panelForces(wing: Wing, at: WingFlow, out: WingLoads): void {
  const { geometry, normals, panels } = wing;
  const { strips } = geometry;
  for (let i = 0; i < panels; i++) {
    const area = geometry.panelChords[i]! * geometry.panelWidths[i]!;
    const ringPart = i >= panels - strips ? LAST_RING_ON_WING : 1;
    const push = at.density * circulationRate(wing, i, at) * area * ringPart;
    const fx = push * normals.x[i]!;
    const fy = push * normals.y[i]!;
    const fz = push * normals.z[i]!;
    // The middle of ring i is the control point of panel i.
    addForce(wing, out, { fx, fy, fz, point: i, reference: at.reference });
    addToStrip(out, i % strips, fx, fy, fz);
    const pressure = at.density * area * panelJump(wing, i, at);
    out.pressureForce[0] = out.pressureForce[0]! + pressure * normals.x[i]!;
    out.pressureForce[1] = out.pressureForce[1]! + pressure * normals.y[i]!;
    out.pressureForce[2] = out.pressureForce[2]! + pressure * normals.z[i]!;
  }
}

/**
 * V · ∇Γ + ∂Γ/∂t on a panel, m²/s². The directions along chord and span are not square to each other on a tapered or swept
 * wing: V is split into its parts along both.
 */
function panelJump(wing: Wing, i: number, at: WingFlow): number {
  const { geometry, chordTangents, spanwiseLengths: lengths, circulation } = wing;
  const { strips, panelChords } = geometry;
  const ahead = i >= strips ? i - strips : -1;
  const { flow } = at;
  const cx = chordTangents.x[i]!;
  const cy = chordTangents.y[i]!;
  const cz = chordTangents.z[i]!;
  const width = Math.sqrt(lengths.x[i]! ** 2 + lengths.y[i]! ** 2 + lengths.z[i]! ** 2);
  const sx = lengths.x[i]! / width;
  const sy = lengths.y[i]! / width;
  const sz = lengths.z[i]! / width;
  const onChord = flow.u[i]! * cx + flow.v[i]! * cy + flow.w[i]! * cz;
  const onSpan = flow.u[i]! * sx + flow.v[i]! * sy + flow.w[i]! * sz;
  const skew = cx * sx + cy * sy + cz * sz;
  const square = 1 - skew * skew;
  const chordRise = (circulation[i]! - (ahead >= 0 ? circulation[ahead]! : 0)) / panelChords[i]!;
  const here = LAST_RING_ON_WING;
  const spanRise =
    here * spanDifference(wing, i) + (ahead >= 0 ? (1 - here) * spanDifference(wing, ahead) : 0);
  const rate =
    here * circulationRate(wing, i, at) + (ahead >= 0 ? (1 - here) * circulationRate(wing, ahead, at) : 0);
  return (
    ((onChord - skew * onSpan) * chordRise + ((onSpan - skew * onChord) * spanRise) / width) / square + rate
  );
}

/** Rise of a ring row's circulation over strip j: half the jumps at both edges, the whole jump at a tip. */
function spanDifference({ circulation, geometry }: Wing, i: number): number {
  const { strips } = geometry;
  const j = i % strips;
  const here = circulation[i]!;
  const left = j > 0 ? 0.5 * (here - circulation[i - 1]!) : here;
  const right = j < strips - 1 ? 0.5 * (circulation[i + 1]! - here) : -here;
  return left + right;
}
