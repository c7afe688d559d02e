import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import { AppError } from "../../../orchestrator/contract/index.ts";
import { radians } from "../vec3.ts";

/** Shape of a wing along its span; `at` is the place along the span from mid span, m. */
export interface Planform {
  readonly spanM: number;
  /** m². */
  readonly areaM2: number;
  /** Area over span, m. */
  readonly meanChordM: number;
  readonly chordAt: (at: number) => number;
  readonly twistRadAt: (at: number) => number;
  /** Quarter chord behind the one at mid span, m. */
  readonly aftAt: (at: number) => number;
  /** Quarter chord above the one at mid span, m. */
  readonly aboveAt: (at: number) => number;
}

/**
 * Planform of a case: straight taper, or a table of stations.
 *
 * @throws CASE_INVALID where the places of the stations do not rise from 0 to 1
 */
export function planform(wing: Case["wing"]): Planform {
  const half = wing.span_m / 2;
  const rise = Math.tan(radians(wing.dihedral_deg));
  const aboveAt = (at: number) => Math.abs(at) * rise;
  const places = wing.stations === null ? [0, 1] : wing.stations.map((station) => station.half_span_fraction);
  checkPlaces(places);
  const chords =
    wing.stations === null
      ? [wing.root_chord_m, wing.tip_chord_m]
      : wing.stations.map((station) => station.chord_m);
  const twists =
    wing.stations === null ? [0, wing.twist_deg] : wing.stations.map((station) => station.twist_deg);
  const afts =
    wing.stations === null
      ? [0, half * Math.tan(radians(wing.sweep_deg))]
      : wing.stations.map((station) => station.aft_m);
  const along = (values: readonly number[]) => (at: number) =>
    interpolate(places, values, Math.min(1, Math.abs(at) / half));
  const areaM2 =
    2 *
    half *
    places
      .slice(1)
      .reduce((sum, place, i) => sum + 0.5 * (chords[i]! + chords[i + 1]!) * (place - places[i]!), 0);
  const twistDegAt = along(twists);
  return {
    spanM: wing.span_m,
    areaM2,
    meanChordM: areaM2 / wing.span_m,
    chordAt: along(chords),
    twistRadAt: (at) => radians(twistDegAt(at)),
    aftAt: along(afts),
    aboveAt,
  };
}

/** Linear interpolation in a table with rising places; constant outside. */
export function interpolate(places: readonly number[], values: readonly number[], at: number): number {
  const above = places.findIndex((place) => place >= at);
  if (above === 0) return values[0]!;
  if (above < 0) return values.at(-1)!;
  const t = (at - places[above - 1]!) / (places[above]! - places[above - 1]!);
  return values[above - 1]! + t * (values[above]! - values[above - 1]!);
}

function checkPlaces(places: readonly number[]): void {
  const rising = places.every((place, i) => i === 0 || place > places[i - 1]!);
  if (rising && places[0] === 0 && places.at(-1) === 1) return;
  throw new AppError("CASE_INVALID", "the stations of the wing do not rise from 0 to 1", {
    where: "wing.stations",
    fix: "Give half_span_fraction from 0 (mid span) to 1 (tip), each larger than the one before.",
  });
}
