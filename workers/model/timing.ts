import type { Case } from "../../orchestrator/contract/case-schema.ts";
import { AppError } from "../../orchestrator/contract/index.ts";
import { flightPath } from "./path/flight-path.ts";
import { norm } from "./vec3.ts";
import { planform } from "./wing/planform.ts";

/** Steps that count as a revolution where nothing turns. */
const STEPS_WITHOUT_CLOCK = 18;
/** Slowest air that anything is referred to, m/s. */
const SLOWEST = 0.1;

/** Time step of a case and what counts in it. */
export interface Timing {
  readonly dtSeconds: number;
  readonly stepsPerRevolution: number;
  /** Speed of the design apparent wind, m/s: all coefficients refer to it. */
  readonly referenceSpeed: number;
  /** Angular speed of each rotor, rad/s, positive whatever its sense. */
  readonly rotorSpeeds: readonly number[];
  /** Rows to which the wing's wake is cut. */
  readonly wingRows: number;
  /** Steps between cuts of the wing's wake. */
  readonly wingCutEvery: number;
}

/**
 * Works out the time step: the clock's, the first rotor's, or that of a way flown in chords.
 *
 * @throws CASE_INVALID where a rotor has two speeds, or there is no wind over the wing
 */
export function timing(inputs: Case): Timing {
  const { numerics, rotors, wing } = inputs;
  const referenceSpeed = norm(flightPath(inputs).designApparent);
  if (referenceSpeed < SLOWEST) {
    throw new AppError("CASE_INVALID", `the air meets the wing at ${referenceSpeed.toPrecision(2)} m/s`, {
      where: "path",
      fix: `Give a flight speed or wind that adds up to at least ${SLOWEST} m/s.`,
    });
  }
  const rotorSpeeds = rotors.map((rotor, i) => rotorSpeed(rotor, referenceSpeed, `rotors.${i + 1}`));
  const clock =
    numerics.clock_revolutions_per_s ??
    (rotorSpeeds[0] === undefined ? null : rotorSpeeds[0] / (2 * Math.PI));
  const chord = planform(wing).meanChordM;
  const dtSeconds =
    clock === null ? (numerics.wing_step_chords * chord) / referenceSpeed : numerics.step_deg / (360 * clock);
  const wayPerRow = referenceSpeed * dtSeconds * numerics.wing_row_every;
  return {
    dtSeconds,
    stepsPerRevolution: clock === null ? STEPS_WITHOUT_CLOCK : 360 / numerics.step_deg,
    referenceSpeed,
    rotorSpeeds,
    wingRows: Math.max(2, Math.ceil((numerics.wing_wake_spans * wing.span_m) / wayPerRow) + 1),
    wingCutEvery: leastCommonMultiple(numerics.truncate_every, numerics.wing_row_every),
  };
}

function rotorSpeed(rotor: Case["rotors"][number], referenceSpeed: number, field: string): number {
  if (rotor.tip_speed_ratio !== null && rotor.revolutions_per_s !== null) {
    throw new AppError("CASE_INVALID", "a rotor has both a tip-speed ratio and revolutions per second", {
      where: `${field}.tip_speed_ratio`,
      fix: "Give one of tip_speed_ratio and revolutions_per_s, and null for the other.",
    });
  }
  if (rotor.revolutions_per_s !== null) return 2 * Math.PI * rotor.revolutions_per_s;
  return ((rotor.tip_speed_ratio ?? rotor.design_tip_speed_ratio) * referenceSpeed) / rotor.radius_m;
}

function leastCommonMultiple(a: number, b: number): number {
  let [x, y] = [a, b];
  while (y > 0) [x, y] = [y, x % y];
  return (a / x) * b;
}
