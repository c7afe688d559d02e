import type { Scenario } from "../scenario.ts";

function exact(
  name: string,
  periods: readonly number[],
  tail: (i: number) => number,
  period: number,
): Scenario {
  return {
    name,
    family: "noise-free",
    trueMean: 0.45,
    oracle: 200,
    tolerance: 0.00225,
    periods,
    longest: 16,
    // The phase is all that chance decides here.
    make: (random, n) => {
      const phase = 2 * Math.PI * random.uniform();
      return Float64Array.from(
        { length: n },
        (_, i) => 0.45 + 0.05 * Math.sin((2 * Math.PI * i) / period + phase) + tail(i),
      );
    },
  };
}

/** What a deterministic solver gives: a clean oscillation, from the start or after a relaxation. */
export const noiseFree: readonly Scenario[] = [
  exact("noise-free period 18", [18], () => 0, 18),
  exact("noise-free period 17.3", [17.3], () => 0, 17.3),
  exact("noise-free after a relaxation of 2 periods", [18], (i) => -0.2 * Math.exp(-i / 36), 18),
  exact("noise-free after a relaxation of 10 periods", [18], (i) => -0.05 * Math.exp(-i / 180), 18),
];
