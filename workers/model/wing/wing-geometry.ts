import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import { addScaled, cross, norm, radians, scaled, unit, type Vec3 } from "../vec3.ts";
import { type CamberLine, camberLine } from "./camber-line.ts";
import { type Planform, planform } from "./planform.ts";
import { type Cluster, stripEdges } from "./strip-edges.ts";

/** Part of a panel behind its ring's leading edge; of the last ring only that lies on the wing. */
export const LAST_RING_ON_WING = 0.75;

/** Vectors as three arrays of components. */
export interface VectorArray {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
}

/** Room for n vectors. */
export const vectorArray = (n: number): VectorArray => ({
  x: new Float64Array(n),
  y: new Float64Array(n),
  z: new Float64Array(n),
});

/**
 * The wing's lattice in body axes (forward, span, normal; origin at the quarter chord at mid span). Panel (k, j), k from the
 * leading edge and j from the left tip, is entry k * strips + j.
 */
export interface WingGeometry {
  readonly planform: Planform;
  readonly chordwise: number;
  readonly strips: number;
  /** Place of the strips' edges along the span, m. */
  readonly edges: Float64Array;
  /** Area of each strip, m². */
  readonly stripAreas: Float64Array;
  /** Ring corners, shape [(chordwise + 1) * (strips + 1)]: quarters of the panels, and the gap behind the trailing edge. */
  readonly nodes: VectorArray;
  /**
   * Where velocities are wanted: control points of the panels, then middles of the spanwise segments (leading edges of the
   * rings), then middles of the chordwise segments, each as far as it lies on the wing.
   */
  readonly points: VectorArray;
  /** Unit normals at the control points. */
  readonly normals: VectorArray;
  /** Panels' unit tangent along the chord (backwards) and over the span, and their lengths, m. */
  readonly chordTangents: VectorArray;
  readonly panelChords: Float64Array;
  readonly panelWidths: Float64Array;
  /** Directed length of the spanwise segments, shape as the panels, and of the chordwise ones, [chordwise * (strips + 1)]. */
  readonly spanwiseLengths: VectorArray;
  readonly chordwiseLengths: VectorArray;
  /** Mid-span chord's direction (towards the nose) and the wing's own normal. */
  readonly chordForward: Vec3;
  readonly chordNormal: Vec3;
}

/** Place of a surface point in body axes; `xi` counts chords behind the leading edge. */
type Surface = (at: number, xi: number) => Vec3;

/**
 * Lays out the wing of a case.
 *
 * The last ring ends a quarter of a panel, or of the way flown in a step where that is less, behind the trailing edge: there
 * the shed vortex stands for what is shed during a step.
 *
 * @param options clusters: where strips cluster besides the tips; wayPerStep: way flown in a step, m
 */
export function wingGeometry(
  wing: Case["wing"],
  options: { readonly clusters: readonly Cluster[]; readonly wayPerStep: number },
): WingGeometry {
  const form = planform(wing);
  const line = camberLine(wing.camber_percent, wing.camber_position_percent);
  const pitch = radians(wing.pitch_deg);
  const surface = surfaceOf(form, line, pitch);
  const chordwise = wing.chordwise_panels;
  const strips = wing.spanwise_panels;
  const edges = stripEdges(wing.span_m, strips, options.clusters);
  const gap = 0.25 * Math.min(1, (options.wayPerStep * chordwise) / form.meanChordM);
  const frame = { chordwise, strips, edges, gap };
  return {
    planform: form,
    chordwise,
    strips,
    edges,
    ...latticeOf(frame, surface),
    ...panelsOf(frame, surface, form, line, pitch),
    chordForward: [Math.cos(pitch), 0, Math.sin(pitch)],
    chordNormal: [-Math.sin(pitch), 0, Math.cos(pitch)],
  };
}

function surfaceOf(form: Planform, line: CamberLine, pitch: number): Surface {
  return (at, xi) => {
    const angle = pitch + form.twistRadAt(at);
    const chord = form.chordAt(at);
    const back = (xi - 0.25) * chord;
    const up = line.heightAt(xi) * chord;
    return [
      -form.aftAt(at) - back * Math.cos(angle) - up * Math.sin(angle),
      at,
      form.aboveAt(at) - back * Math.sin(angle) + up * Math.cos(angle),
    ];
  };
}

/** `gap`: end of the last ring behind the trailing edge, in panels. */
type Frame = Pick<WingGeometry, "chordwise" | "strips" | "edges"> & { readonly gap: number };

function latticeOf({ chordwise, strips, edges, gap }: Frame, surface: Surface) {
  const nodes = vectorArray((chordwise + 1) * (strips + 1));
  const points = vectorArray(2 * chordwise * strips + chordwise * (strips + 1));
  const spanwiseLengths = vectorArray(chordwise * strips);
  const chordwiseLengths = vectorArray(chordwise * (strips + 1));
  const node = (k: number, j: number): Vec3 =>
    surface(edges[j]!, (k === chordwise ? k + gap : k + 0.25) / chordwise);
  for (let k = 0; k <= chordwise; k++) {
    for (let j = 0; j <= strips; j++) {
      put(nodes, k * (strips + 1) + j, node(k, j));
      if (k === chordwise) continue;
      const part = k === chordwise - 1 ? LAST_RING_ON_WING / (LAST_RING_ON_WING + gap) : 1;
      const length = scaled(addScaled(node(k + 1, j), node(k, j), -1), part);
      put(chordwiseLengths, k * (strips + 1) + j, length);
      put(points, 2 * chordwise * strips + k * (strips + 1) + j, addScaled(node(k, j), length, 0.5));
      if (j === strips) continue;
      const panel = k * strips + j;
      const along = addScaled(node(k, j + 1), node(k, j), -1);
      put(spanwiseLengths, panel, along);
      put(points, chordwise * strips + panel, addScaled(node(k, j), along, 0.5));
      const [left, right] = [0, 1].map((side) => surface(edges[j + side]!, (k + 0.75) / chordwise));
      put(points, panel, scaled(addScaled(left!, right!, 1), 0.5));
    }
  }
  return { nodes, points, spanwiseLengths, chordwiseLengths };
}

function panelsOf(
  { chordwise, strips, edges }: Frame,
  surface: Surface,
  form: Planform,
  line: CamberLine,
  pitch: number,
) {
  const normals = vectorArray(chordwise * strips);
  const chordTangents = vectorArray(chordwise * strips);
  const panelChords = new Float64Array(chordwise * strips);
  const panelWidths = new Float64Array(chordwise * strips);
  const stripAreas = new Float64Array(strips);
  for (let j = 0; j < strips; j++) {
    const middle = (edges[j]! + edges[j + 1]!) / 2;
    for (let k = 0; k < chordwise; k++) {
      const at = k * strips + j;
      const xi = (k + 0.75) / chordwise;
      const across = addScaled(surface(edges[j + 1]!, xi), surface(edges[j]!, xi), -1);
      const angle = pitch + form.twistRadAt(middle) - Math.atan(line.slopeAt(xi));
      const tangent: Vec3 = [-Math.cos(angle), 0, -Math.sin(angle)];
      put(chordTangents, at, tangent);
      const square = cross(across, tangent);
      put(normals, at, unit(square));
      const chord = (form.chordAt(edges[j]!) + form.chordAt(edges[j + 1]!)) / 2 / chordwise;
      panelChords[at] = chord;
      // Width across the chord, so that chord times width is the panel's area whatever the sweep.
      panelWidths[at] = norm(square);
      stripAreas[j] = stripAreas[j]! + chord * norm(square);
    }
  }
  return { normals, chordTangents, panelChords, panelWidths, stripAreas };
}

function put(array: VectorArray, at: number, [x, y, z]: Vec3): void {
  array.x[at] = x;
  array.y[at] = y;
  array.z[at] = z;
}
