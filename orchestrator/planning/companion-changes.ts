import type { Case } from "../contract/case-schema.ts";
import type { PlannedRun } from "../contract/index.ts";
import type { Inputs } from "./field-path.ts";

/** In which respect a companion differs from its run. */
export type Aspect = NonNullable<PlannedRun["companionOf"]>["aspect"];

/** Factors of companions that are asked for with a bare "on". */
export const USUAL_FACTORS: Readonly<Record<Aspect, number>> = { "wake-length": 1.5, step: 0.5, strips: 1.5 };

/**
 * Changes that make a companion of a case: all wakes, the time step or the number of strips times a factor, and everything
 * else physically the same. A finer step keeps the rotor wakes at their length, which takes more rows.
 */
export function companionChanges(inputs: Case, aspect: Aspect, factor: number): Inputs {
  const { numerics, rotors, wing } = inputs;
  const rows = (times: number) =>
    rotors.length === 0
      ? {}
      : { "numerics.rotor_wake_rows": Math.max(1, Math.round(numerics.rotor_wake_rows * times)) };
  switch (aspect) {
    case "wake-length":
      return { "numerics.wing_wake_spans": tidy(numerics.wing_wake_spans * factor), ...rows(factor) };
    case "step":
      return {
        "numerics.step_deg": tidy(numerics.step_deg * factor),
        "numerics.wing_step_chords": tidy(numerics.wing_step_chords * factor),
        ...rows(1 / factor),
      };
    case "strips":
      return { "wing.spanwise_panels": Math.max(1, Math.round(wing.spanwise_panels * factor)) };
  }
}

/** A product without the noise of its last digits. */
const tidy = (x: number): number => Number(x.toPrecision(12));
