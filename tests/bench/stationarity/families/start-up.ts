import { ORACLE, oracleHalfWidth, plus, type Scenario } from "../scenario.ts";
import { autoregressive } from "./noise.ts";

const MEAN = 10;
const noise = autoregressive(0.9);
const tolerance = oracleHalfWidth(noise.longRunSd);

function starting(name: string, family: string, tail: (t: number) => number, longest = 24): Scenario {
  return {
    name,
    family,
    trueMean: MEAN,
    oracle: ORACLE,
    tolerance,
    periods: [],
    longest,
    make: plus(noise.make, (i) => MEAN + tail(i / ORACLE)),
  };
}
const decay = (height: number, tau: number) => (t: number) => -height * Math.exp(-t / tau);

/** Histories that start impulsively; heights in standard deviations of the noise, times in oracle lengths. */
export const startUp: readonly Scenario[] = [
  starting("start-up 0.05 N", "start-up", decay(10, 0.05)),
  starting("start-up 0.25 N", "start-up", decay(10, 0.25)),
  starting("oscillatory start-up 0.05 N", "start-up", (t) => decay(10, 0.05)(t) * Math.cos(t / 0.02)),
  starting("start-up 1/t", "1/t start-up", (t) => -10 / (1 + t / 0.01)),
];

/** Relaxations five times slower than the record: total movement 6 tolerances, not told from rest by any test. */
export const unfinished: readonly Scenario[] = [
  starting("relaxation 5 N", "unfinished relaxation", decay(6 * tolerance, 5), 1.6),
];
