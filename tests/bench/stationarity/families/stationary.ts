import { ORACLE, oracleHalfWidth, plus, type Scenario } from "../scenario.ts";
import { autoregressive, heavyTailed, type Noise, ringing, skewed, white } from "./noise.ts";

const MEAN = 10;

function steady(noise: Noise, oracle: number = ORACLE): Scenario {
  return {
    name: noise.name,
    family: "stationary",
    trueMean: MEAN,
    oracle,
    tolerance: oracleHalfWidth(noise.longRunSd, oracle),
    periods: [],
    longest: 16,
    make: plus(noise.make, () => MEAN),
  };
}

/** The spread doubles half-way through the oracle's length: to be flagged, the mean is sound. */
const varianceChange: Scenario = {
  ...steady(autoregressive(0.5)),
  name: "variance change",
  family: "variance change",
  make: (random, n) =>
    autoregressive(0.5)
      .make(random, n)
      .map((value, i) => MEAN + value * (i < n / 2 ? 0.5 : 1)),
};

/** Histories without start-up, drift or period. */
export const stationary: readonly Scenario[] = [
  steady(white),
  steady(autoregressive(0.5)),
  steady(autoregressive(0.9)),
  steady(autoregressive(0.99), 20_000),
  steady(autoregressive(0.995), 40_000),
  steady(ringing),
  steady(skewed),
  steady(heavyTailed),
  { ...steady(autoregressive(0.9), 500), name: "AR(1) 0.9, loose tolerance" },
  varianceChange,
];
