import { availableParallelism } from "node:os";
import { resolve } from "node:path";
import type { Plan } from "../contract/index.ts";
import { expandCampaign, readCampaign } from "../planning/index.ts";
import type { CliIo } from "./cli-io.ts";
import { confirmRuns } from "./confirm-runs.ts";

/** How a campaign is planned from the command line. */
export interface PlanFromFileOptions {
  /** Says that a very large number of runs is meant, so that nobody is asked. */
  readonly yes: boolean;
  /** Speed of the model, pairs a second on one core; measured if left out. */
  readonly pairsPerSecond?: number | undefined;
}

/**
 * Reads a campaign file and expands it for the built-in model on this machine. Writes nothing.
 *
 * @param file path as given, taken from the current folder
 * @throws what readCampaign and expandCampaign throw; CAMPAIGN_TOO_LARGE where a very large number was not confirmed
 */
export async function planFromFile(file: string, options: PlanFromFileOptions, io: CliIo): Promise<Plan> {
  const campaign = await readCampaign(resolve(io.cwd, file), file);
  const manyRunsMeant = await confirmRuns(io, campaign, options.yes);
  // The model is loaded only here: help and the commands that need no model start without it.
  const { loadBuiltInSolver } = await import("./built-in-solver.ts");
  const { describe, modelVersion, speed } = loadBuiltInSolver();
  return expandCampaign(campaign, {
    describe,
    modelVersion,
    pairsPerSecond: options.pairsPerSecond ?? speed(),
    manyRunsMeant,
    cores: availableParallelism(),
  });
}

/** Worker processes that a plan comes to on this machine. */
export function workersOf(plan: Plan): number {
  return plan.workers ?? availableParallelism();
}
