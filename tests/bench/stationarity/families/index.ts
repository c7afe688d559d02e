// Scenario families of the operating characteristics of the mean: how histories are made, with everything about them
// known. Nothing here is seen by the judge but samples, tolerance and declared periods. Start with ../scenario.ts.
import type { Scenario } from "../scenario.ts";
import { longRecords, movingMeans } from "./moving.ts";
import { noiseFree } from "./noise-free.ts";
import { periodic } from "./periodic.ts";
import { startUp, unfinished } from "./start-up.ts";
import { stationary } from "./stationary.ts";

/** Scenarios for finished records only: their movement is tied to the record's length. */
export const FINISHED_SCENARIOS: readonly Scenario[] = longRecords;

/** Every scenario of running records, in the order of the tables. */
export const SCENARIOS: readonly Scenario[] = [
  ...stationary,
  ...periodic,
  ...noiseFree,
  ...startUp,
  ...unfinished,
  ...movingMeans,
];
