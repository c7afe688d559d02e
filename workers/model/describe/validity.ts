import type { Case } from "../../../orchestrator/contract/case-schema.ts";
import { AppError, type PlannedRun } from "../../../orchestrator/contract/index.ts";
import type { FlightPath } from "../path/flight-path.ts";
import { clustersOf } from "../state/model-state.ts";
import type { Timing } from "../timing.ts";
import { planform } from "../wing/planform.ts";
import { stripEdges } from "../wing/strip-edges.ts";

/** A doubt about a case, with the field that raises it. */
export type CaseWarning = PlannedRun["warnings"][number];

/** Strips per rotor diameter below which the rotor's effect on the wing is doubtful, and below which it is refused. */
const STRIPS_WANTED = 5;
const STRIPS_NEEDED = 3;
/** Largest step of a rotor without a warning, and without a refusal, degrees. */
const STEP_WANTED = 30;
const STEP_ALLOWED = 45;
/** Panels beyond which the influence matrix gets out of hand. */
const PANELS_MAX = 2000;
/** Thrust coefficient above which momentum theory, and with it a helical wake, breaks down. */
const CT_MAX = 0.7;
/** Closeness at which a number of steps counts as whole. */
const WHOLE = 1e-6;

/**
 * Doubts about a case.
 *
 * @throws CASE_INVALID where it is out of the method's reach
 */
export function validity(inputs: Case, times: Timing, path: FlightPath): CaseWarning[] {
  checkSize(inputs);
  checkHeight(inputs, path);
  checkTether(inputs);
  return [
    ...stripWarnings(inputs),
    ...stepWarnings(times),
    ...coreWarnings(inputs, times),
    ...cutWarnings(inputs, times),
  ];
}

/** Doubts that only the averages of a run can raise, by channel name. */
export function loadDoubts(means: Readonly<Record<string, number>>): CaseWarning[] {
  return Object.entries(means)
    .filter(([name, mean]) => /^rotor\d+\.CT(local)?$/.test(name) && mean > CT_MAX)
    .map(([name, mean]) => ({
      code: "thrust-too-high",
      field: name,
      words: `${name} of ${mean.toPrecision(3)} is above ${CT_MAX}: the flow behind such a rotor breaks up and mixes, which a filament wake does not show`,
    }));
}

function checkSize({ wing }: Case): void {
  const panels = wing.chordwise_panels * wing.spanwise_panels;
  if (panels <= PANELS_MAX) return;
  throw new AppError("CASE_INVALID", `a wing of ${panels} panels`, {
    where: "wing.spanwise_panels",
    fix: `Use at most ${PANELS_MAX} panels, chordwise times spanwise.`,
  });
}

function checkHeight({ wind }: Case, path: FlightPath): void {
  if (wind.shear_exponent === 0 || wind.centre_height_m + path.lowestM > 0) return;
  throw new AppError("CASE_INVALID", `the path goes ${-path.lowestM} m below its centre, into the ground`, {
    where: "wind.centre_height_m",
    fix: "Raise the centre, or set wind.shear_exponent to 0 where the ground does not matter.",
  });
}

function checkTether({ path }: Case): void {
  if (path.kind !== "circle" || path.tether_length_m === null || path.tether_length_m > path.radius_m) return;
  throw new AppError(
    "CASE_INVALID",
    `a tether of ${path.tether_length_m} m does not reach a circle of ${path.radius_m} m radius`,
    { where: "path.tether_length_m", fix: `Give more than ${path.radius_m} m, or null.` },
  );
}

function stripWarnings(inputs: Case): CaseWarning[] {
  const { wing, rotors } = inputs;
  const edges = stripEdges(wing.span_m, wing.spanwise_panels, clustersOf(inputs));
  return rotors.flatMap((rotor, i) => {
    const field = `rotors.${i + 1}`;
    const low = Math.max(-wing.span_m / 2, rotor.along_span_m - rotor.radius_m);
    const high = Math.min(wing.span_m / 2, rotor.along_span_m + rotor.radius_m);
    if (high <= low) return [];
    const strips = (stripsWithin(edges, low, high) * 2 * rotor.radius_m) / (high - low);
    const count = `${strips.toFixed(1)} strips of the wing lie within the diameter of rotor ${i + 1}`;
    const fix = "use more wing.spanwise_panels, or wing.cluster_at_m";
    if (strips < STRIPS_NEEDED) {
      throw new AppError("CASE_INVALID", `${count}: too few to feel its wake`, {
        where: `wing.spanwise_panels (${field})`,
        fix: `Take at least ${STRIPS_WANTED}: ${fix}.`,
      });
    }
    if (strips >= STRIPS_WANTED) return [];
    return [
      {
        code: "few-strips-under-rotor",
        field: "wing.spanwise_panels",
        words: `${count}; below ${STRIPS_WANTED} even the sign of the rotor's effect can be wrong: ${fix}`,
      },
    ];
  });
}

/** Strips within a stretch, parts of strips included. */
function stripsWithin(edges: Float64Array, low: number, high: number): number {
  let count = 0;
  for (let j = 0; j + 1 < edges.length; j++) {
    const inside = Math.min(high, edges[j + 1]!) - Math.max(low, edges[j]!);
    if (inside > 0) count += inside / (edges[j + 1]! - edges[j]!);
  }
  return count;
}

function stepWarnings(times: Timing): CaseWarning[] {
  return times.rotorSpeeds.flatMap((speed, i) => {
    const degrees = (speed * times.dtSeconds * 180) / Math.PI;
    const words = `rotor ${i + 1} turns by ${degrees.toFixed(1)} degrees a step`;
    if (degrees > STEP_ALLOWED * (1 + WHOLE)) {
      throw new AppError("CASE_INVALID", `${words}, more than the ${STEP_ALLOWED} that the method bears`, {
        where: "numerics.step_deg",
        fix: "Use a smaller step_deg or a faster clock_revolutions_per_s.",
      });
    }
    if (degrees <= STEP_WANTED * (1 + WHOLE)) return [];
    return [
      {
        code: "coarse-step",
        field: "numerics.step_deg",
        words: `${words}; above ${STEP_WANTED} its wake is a polygon: use a smaller numerics.step_deg`,
      },
    ];
  });
}

function coreWarnings({ numerics, rotors, wing }: Case, times: Timing): CaseWarning[] {
  const warn = (field: string, core: number, spacing: number, whose: string): CaseWarning[] =>
    core <= 0.5 * spacing * (1 + WHOLE)
      ? []
      : [
          {
            code: "thick-core",
            field,
            words: `the core of ${whose} (${core.toPrecision(3)} m) is above half the spacing of its rows (${spacing.toPrecision(3)} m): neighbouring rows melt into each other`,
          },
        ];
  const wingCore = numerics.cores.wing_core_chords * planform(wing).meanChordM;
  const wingRow = times.referenceSpeed * times.dtSeconds * numerics.wing_row_every;
  return [
    ...warn("numerics.cores.wing_core_chords", wingCore, wingRow, "the wing's wake"),
    ...rotors.flatMap((rotor, i) =>
      warn(
        "numerics.cores.rotor_core_radii",
        numerics.cores.rotor_core_radii * rotor.radius_m,
        times.rotorSpeeds[i]! * times.dtSeconds * rotor.radius_m,
        `the wake of rotor ${i + 1}`,
      ),
    ),
  ];
}

function cutWarnings({ numerics, rotors }: Case, times: Timing): CaseWarning[] {
  const every = numerics.truncate_every;
  if (every === 1) return [];
  return rotors.flatMap((rotor, i) => {
    const passing = (2 * Math.PI) / (rotor.blades * times.rotorSpeeds[i]! * times.dtSeconds);
    const ratio = passing / every;
    if (Math.abs(ratio - Math.round(ratio)) > WHOLE || ratio < 0.5) return [];
    return [
      {
        code: "cut-in-step-with-blades",
        field: "numerics.truncate_every",
        words: `wakes are cut every ${every} steps, which divides the ${passing.toFixed(3)} steps between blades of rotor ${i + 1}: the ripple of the cuts can't be told from the blades'`,
      },
    ];
  });
}
