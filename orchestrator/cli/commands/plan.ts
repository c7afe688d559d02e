import { Command } from "commander";
import type { CommandIo } from "../cli-io.ts";
import { withExamples } from "../examples.ts";
import { positiveValue } from "../option-values.ts";
import { planFromFile, workersOf } from "../plan-from-file.ts";
import { planWords, predictedEnd } from "../plan-words.ts";
import { writeJson, writeOut } from "../write-out.ts";

interface PlanOptions {
  readonly json?: boolean;
  readonly all?: boolean;
  readonly yes?: boolean;
  readonly speed?: number;
}

/** `midwatch plan`: what a campaign would run, at what cost, until when. Writes nothing to disk. */
export function planCommand(io: CommandIo): Command {
  const command = new Command("plan")
    .description(
      "Show what a campaign would run: count, runs with their ids and steps, order of the night, predicted cost and end. Runs nothing and writes nothing.",
    )
    .argument("<file>", "campaign file, YAML or JSON")
    .option("--json", "print one JSON document with every run and its complete inputs")
    .option("--all", "print every run, however many")
    .option("--yes", "do not ask, however many runs there are")
    .option(
      "--speed <pairs>",
      "segment–point pairs a second on one core, instead of measuring them",
      positiveValue("--speed", "pairs a second"),
    )
    .action((file: string, options: PlanOptions) => showPlan(file, options, io));
  return withExamples(command, [
    ["midwatch plan examples/first-campaign.yaml", "what would be run tonight, and when it would be done"],
    ["midwatch plan night.yaml --json > plan.json", "the same for a script, with the inputs of every run"],
  ]);
}

async function showPlan(file: string, options: PlanOptions, io: CommandIo): Promise<void> {
  const plan = await planFromFile(file, { yes: options.yes === true, pairsPerSecond: options.speed }, io);
  const now = io.now();
  const workers = workersOf(plan);
  if (options.json !== true)
    return writeOut(io.stdout, planWords(plan, { now, workers, showAll: options.all === true }));
  const { source: _, ...document } = plan;
  const predicted = { ...plan.predicted, workers, end: predictedEnd(plan, now).toISOString() };
  return writeJson(io.stdout, { ...document, predicted });
}
