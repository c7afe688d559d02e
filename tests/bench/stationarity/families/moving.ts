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

/** Oracle's tolerance is a third of what these records may use, so that nothing but the movement stands in the way. */
function inRecord(name: string, path: (share: number) => number): Scenario {
  const length = 9 * ORACLE;
  return { ...moving(name, "movement in a long record", (t) => path((t * ORACLE) / length)), longest: 9 };
}

/** Finished records of nine oracle lengths (tolerance three ideal half-widths), moving by so much over the record. */
export const longRecords: readonly Scenario[] = [
  inRecord("record drifts by 2 tolerances", (s) => 2 * tolerance * s),
  inRecord("record drifts by 4 tolerances", (s) => 4 * tolerance * s),
  inRecord("record steps by 3 tolerances", (s) => (s < 0.7 ? 0 : 3 * tolerance)),
  inRecord("record relaxes with 0.3 of its length", (s) => -100 * tolerance * Math.exp(-s / 0.3)),
];
