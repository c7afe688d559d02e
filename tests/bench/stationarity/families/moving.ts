import { ORACLE, oracleHalfWidth, plus, type Scenario } from "../scenario.ts";
import { autoregressive } from "./noise.ts";

const noise = autoregressive(0.9);
const tolerance = oracleHalfWidth(noise.longRunSd);

function moving(name: string, family: string, path: (t: number) => number): Scenario {
  return {
    name,
    family,
    trueMean: null,
    oracle: ORACLE,
    tolerance,
    periods: [],
    longest: 6,
    make: plus(noise.make, (i) => 10 + path(i / ORACLE)),
  };
}

/** Histories whose mean moves: by so many tolerances over the oracle's length, or by a step at 70 % of it. */
export const movingMeans: readonly Scenario[] = [
  moving("drift of 1 tolerance", "drift 1", (t) => tolerance * t),
  moving("drift of 2 tolerances", "drift 2", (t) => 2 * tolerance * t),
  moving("drift of 4 tolerances", "drift 4", (t) => 4 * tolerance * t),
  moving("drift of 8 tolerances", "drift 8", (t) => 8 * tolerance * t),
];

/** A step in the mean, late in a record of three oracle lengths. */
export const steps: readonly Scenario[] = [
  { ...moving("step of 4 tolerances", "step", (t) => (t < 2.1 ? 0 : 4 * tolerance)), longest: 3 },
];
