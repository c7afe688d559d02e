import type { CampaignFile } from "../contract/campaign-schema.ts";
import type { CaseDescription } from "./case-description.ts";

/** A length of a run as a campaign gives it, in one of three units. */
export interface GivenLength {
  readonly revolutions?: number | undefined;
  readonly steps?: number | undefined;
  readonly seconds?: number | undefined;
}

/** What turns lengths into steps of a run. */
export interface StepsOfRun {
  readonly description: CaseDescription;
  readonly stepScale: number;
}

/** Lengths of a run in its own time steps. */
export interface RunLengths {
  readonly longestSteps: number;
  readonly shortestSteps: number;
  readonly warnings: readonly { readonly code: string; readonly field: string; readonly words: string }[];
}

/** Whole steps of a length, rounded up; null where none was given. Steps of the campaign are `stepScale` steps of this run. */
function lengthInSteps(given: GivenLength, { description, stepScale }: StepsOfRun): number | null {
  // A length that is a whole number of steps in exact arithmetic is not to become one more by rounding.
  const up = (steps: number) => Math.max(1, Math.ceil(steps * (1 - 1e-12)));
  if (given.steps !== undefined) return up(given.steps * stepScale);
  if (given.revolutions !== undefined) return up(given.revolutions * description.stepsPerRevolution);
  return given.seconds === undefined ? null : up(given.seconds / description.dtSeconds);
}

/**
 * Longest and shortest length of a run. Nothing is accepted before the shortest asked for, before the slowest declared
 * period has passed once, and, on a closed path, before the kept wake can have come round, unless the first loop is wanted.
 */
export function runLengths(
  accept: CampaignFile["accept"],
  longestOfCase: GivenLength,
  run: StepsOfRun,
): RunLengths {
  const { description } = run;
  const { longest_revolutions, longest_steps, longest_s, shortest_revolutions, shortest_steps, shortest_s } =
    accept;
  const campaignLongest = { revolutions: longest_revolutions, steps: longest_steps, seconds: longest_s };
  // The schema makes sure that the campaign gives one.
  const longestSteps = lengthInSteps(longestOfCase, run) ?? lengthInSteps(campaignLongest, run) ?? 1;
  const asked =
    lengthInSteps({ revolutions: shortest_revolutions, steps: shortest_steps, seconds: shortest_s }, run) ??
    0;
  const slowest = Math.ceil(Math.max(0, ...description.periods.map((period) => period.steps)));
  const wakeReturn = accept.first_loop_wanted ? 0 : (description.wakeReturnSteps ?? 0);
  const reasons = [
    { steps: asked, code: "shorter-than-asked", words: "the shortest run asked for" },
    { steps: slowest, code: "shorter-than-period", words: "one slowest period" },
    {
      steps: wakeReturn,
      code: "shorter-than-wake-return",
      words: "the return of the wake to the wing (accept.first_loop_wanted takes averages from before)",
    },
  ];
  const warnings = reasons
    .filter(({ steps }) => steps >= longestSteps)
    .map(({ steps, code, words }) => ({
      code,
      field: "accept",
      words: `nothing can be accepted: the longest run has ${longestSteps} steps, and ${words} takes ${steps}`,
    }));
  return { longestSteps, shortestSteps: Math.max(asked, slowest, wakeReturn), warnings };
}
