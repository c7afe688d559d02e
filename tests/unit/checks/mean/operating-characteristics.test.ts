import { describe, expect, it } from "vitest";
import { judgeRecord, nextLookLength } from "../../../../checks/index.ts";
import { FINISHED_SCENARIOS, SCENARIOS } from "../../../bench/stationarity/families/index.ts";
import {
  type Estimate,
  fixedLength,
  type RuleUnderTest,
  sequential,
} from "../../../bench/stationarity/measure.ts";

// A short run of the published measurement, seeds fixed. Limits are the published ones less 2.5 standard errors.
const rule: RuleUnderTest = { judge: judgeRecord, nextLook: nextLookLength };
const REPLICATIONS = 24;
const named = (name: string) =>
  [...SCENARIOS, ...FINISHED_SCENARIOS].find((scenario) => scenario.name === name)!;
const slack = (share: number) => 2.5 * Math.sqrt((share * (1 - share)) / REPLICATIONS);
const atLeast = (found: Estimate | null, share: number) =>
  expect(found!.value).toBeGreaterThanOrEqual(share - slack(share));

describe.each([
  ["AR(1) 0.9", 0.93, 2.9],
  ["start-up 0.05 N", 0.93, 3],
  ["start-up 0.25 N", 0.93, 6],
  ["start-up 1/t", 0.9, 6],
  ["period 31.7 declared", 0.93, 3],
])("%s, looked at while it runs", (name, coverage, cost) => {
  it(`covers in ${coverage} of the cases, at ${cost} oracle lengths at most`, () => {
    const found = sequential(named(name), rule, REPLICATIONS, 880_001);
    atLeast(found.coverage, coverage);
    atLeast(found.accepted, 0.95);
    expect(found.cost!.value - 2.5 * found.cost!.se).toBeLessThanOrEqual(cost);
  });
});

describe.each([
  ["drift of 2 tolerances", 0.1],
  ["drift of 4 tolerances", 0.02],
])("%s over the oracle's length", (name, share) => {
  it(`is accepted in ${share} of the cases at most`, () => {
    const found = sequential(named(name), rule, REPLICATIONS, 890_001);
    expect(found.accepted.value).toBeLessThanOrEqual(share + slack(share));
  });
});

it.each([
  "record drifts by 4 tolerances",
  "record steps by 3 tolerances",
  "record relaxes with 0.3 of its length",
])("%s: is not accepted", (name) => {
  const scenario = named(name);
  expect(
    fixedLength(scenario, rule, REPLICATIONS, 900_001, scenario.longest).accepted.value,
  ).toBeLessThanOrEqual(0.02 + slack(0.02));
});
