// Scenario families of the operating characteristics of the mean: how histories are made, with everything about them
// known. Nothing here is seen by the judge but samples, tolerance and declared periods. Start with ../scenario.ts.
import type { Scenario } from "../scenario.ts";
import { movingMeans, steps } from "./moving.ts";
import { noiseFree } from "./noise-free.ts";
import { periodic } from "./periodic.ts";
import { startUp, unfinished } from "./start-up.ts";
import { stationary } from "./stationary.ts";

/** Every scenario, in the order of the tables. */
export const SCENARIOS: readonly Scenario[] = [
  ...stationary,
  ...periodic,
  ...noiseFree,
  ...startUp,
  ...unfinished,
  ...movingMeans,
  ...steps,
];
