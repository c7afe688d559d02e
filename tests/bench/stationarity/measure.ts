import type { JudgeOptions } from "../../../checks/index.ts";
import type { ChannelJudgement } from "../../../orchestrator/contract/index.ts";
import { randomStream } from "./random.ts";
import type { Scenario } from "./scenario.ts";

/** The rule under test, and the lengths at which it looks at a running record. */
export interface RuleUnderTest {
  judge(x: Float64Array, options: JudgeOptions): ChannelJudgement;
  nextLook(length: number): number;
}

/** A share or an average with its standard error. */
export interface Estimate {
  readonly value: number;
  readonly se: number;
}

/** What became of many records of one scenario. */
export interface Characteristics {
  readonly scenario: string;
  readonly family: string;
  readonly mode: "sequential" | "fixed length";
  readonly replications: number;
  readonly accepted: Estimate;
  /** Of the accepted: the interval covers the true mean; null where there is no mean or nothing was accepted. */
  readonly coverage: Estimate | null;
  /** Of the accepted: the value is within one tolerance of the true mean. */
  readonly withinTolerance: Estimate | null;
  /** Average samples used over the oracle's; records never accepted count with their longest length. */
  readonly cost: Estimate | null;
  /** Half-width of the accepted over the oracle's half-width of the same length, average. */
  readonly halfWidthOverIdeal: Estimate | null;
  readonly flaggedVariance: Estimate;
}

interface Outcome {
  readonly judgement: ChannelJudgement;
  readonly samples: number;
}

/** Runs a scenario many times, the rule looking again and again until it accepts or the longest length is reached. */
export function sequential(
  scenario: Scenario,
  rule: RuleUnderTest,
  replications: number,
  seed: number,
): Characteristics {
  const longest = Math.ceil(scenario.longest * scenario.oracle);
  const run = (x: Float64Array): Outcome => {
    for (let n = rule.nextLook(0); n < longest; n = rule.nextLook(n)) {
      const judgement = rule.judge(x.subarray(0, n), optionsOf(scenario));
      if (judgement.verdict === "accepted") return { judgement, samples: n };
    }
    return { judgement: rule.judge(x, optionsOf(scenario)), samples: longest };
  };
  const outcomes = records(scenario, longest, replications, seed).map(run);
  return summarise(scenario, "sequential", outcomes);
}

/** Runs a scenario many times at one length, given in oracle lengths. */
export function fixedLength(
  scenario: Scenario,
  rule: RuleUnderTest,
  replications: number,
  seed: number,
  lengths: number,
): Characteristics {
  const n = Math.ceil(lengths * scenario.oracle);
  const run = (x: Float64Array): Outcome => ({ judgement: rule.judge(x, optionsOf(scenario)), samples: n });
  return summarise(scenario, "fixed length", records(scenario, n, replications, seed).map(run));
}

function optionsOf({ tolerance, periods }: Scenario): JudgeOptions {
  return { dt: 1, tolerance: { absolute: tolerance }, periods };
}

function records(scenario: Scenario, n: number, replications: number, seed: number) {
  // Made one by one when asked for: all of them together would not fit into memory.
  return {
    map: <T>(judge: (x: Float64Array) => T): T[] =>
      Array.from({ length: replications }, (_, k) => judge(scenario.make(randomStream(seed + 7919 * k), n))),
  };
}

function summarise(
  scenario: Scenario,
  mode: Characteristics["mode"],
  outcomes: readonly Outcome[],
): Characteristics {
  const { trueMean, oracle, tolerance } = scenario;
  const accepted = outcomes.filter(({ judgement }) => judgement.verdict === "accepted");
  const errors = (limit: (j: ChannelJudgement) => number) =>
    trueMean === null || accepted.length === 0
      ? null
      : share(accepted.map(({ judgement: j }) => Math.abs(j.mean! - trueMean) <= limit(j)));
  return {
    scenario: scenario.name,
    family: scenario.family,
    mode,
    replications: outcomes.length,
    accepted: share(outcomes.map(({ judgement }) => judgement.verdict === "accepted")),
    coverage: errors((j) => j.halfWidth!),
    withinTolerance: errors(() => tolerance),
    cost: trueMean === null ? null : average(outcomes.map(({ samples }) => samples / oracle)),
    halfWidthOverIdeal:
      accepted.length === 0
        ? null
        : average(
            accepted.map(
              ({ judgement, samples }) => judgement.halfWidth! / (tolerance * Math.sqrt(oracle / samples)),
            ),
          ),
    flaggedVariance: share(outcomes.map(({ judgement }) => judgement.warnings.includes("variance-changed"))),
  };
}

function share(hits: readonly boolean[]): Estimate {
  const value = hits.filter(Boolean).length / hits.length;
  return { value, se: Math.sqrt((value * (1 - value)) / hits.length) };
}

function average(values: readonly number[]): Estimate {
  const value = values.reduce((sum, v) => sum + v, 0) / values.length;
  const square = values.reduce((sum, v) => sum + (v - value) ** 2, 0) / Math.max(1, values.length - 1);
  return { value, se: Math.sqrt(square / values.length) };
}
