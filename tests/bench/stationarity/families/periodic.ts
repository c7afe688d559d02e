import { ORACLE, oracleHalfWidth, plus, type Scenario } from "../scenario.ts";
import { autoregressive } from "./noise.ts";

const MEAN = 10;
const noise = autoregressive(0.6);

function wave(name: string, oscillation: (i: number) => number, periods: readonly number[]): Scenario {
  return {
    name,
    family: "periodic",
    trueMean: MEAN,
    oracle: ORACLE,
    tolerance: oracleHalfWidth(noise.longRunSd),
    periods,
    longest: 16,
    make: plus(noise.make, (i) => MEAN + oscillation(i)),
  };
}
const sine = (period: number) => (i: number) => 5 * Math.sin((2 * Math.PI * i) / period);
/** What cutting a wake every k steps does to a load. */
const sawTooth = (period: number) => (i: number) => 2 * ((i % period) / period - (period - 1) / (2 * period));

/** Histories that oscillate, with the period declared or not, whole or not, and with two periods at once. */
export const periodic: readonly Scenario[] = [
  wave("period 36 declared", sine(36), [36]),
  wave("period 31.7 declared", sine(31.7), [31.7]),
  wave("period 36 unknown", sine(36), []),
  wave("period 31.7 unknown", sine(31.7), []),
  wave("saw-tooth 7 and period 18 declared", (i) => sine(18)(i) + sawTooth(7)(i), [7, 18]),
  {
    ...wave("few cycles of 18 declared", sine(18), [18]),
    oracle: 200,
    tolerance: oracleHalfWidth(noise.longRunSd, 200),
  },
];
