import { Command } from "commander";
import type { CommandIo } from "../cli-io.ts";
import { type DataOptions, withAnswers, withData } from "../data-folder.ts";
import { withExamples } from "../examples.ts";
import { writeJson, writeOut } from "../write-out.ts";

interface StopOptions extends DataOptions {
  readonly json?: boolean;
}

/** `midwatch stop`: ends the work on a campaign; nothing computed is lost. */
export function stopCommand(io: CommandIo): Command {
  const command = withData(new Command("stop"))
    .description(
      "Stop a campaign: what runs is checkpointed, and nothing more is computed until it is launched again. Nothing is lost.",
    )
    .argument("<campaign>", "campaign to stop")
    .option("--json", "print one JSON document")
    .action((campaign: string, options: StopOptions) => stop(campaign, options, io));
  return withExamples(command, [
    ["midwatch stop lantern", "from another terminal than the one in which it was launched"],
  ]);
}

async function stop(campaign: string, options: StopOptions, io: CommandIo): Promise<void> {
  await withAnswers(options, io, (answers) => answers.stop(campaign));
  if (options.json === true) await writeJson(io.stdout, { campaign, stopped: true });
  else await writeOut(io.stdout, `${campaign} is stopped. Launch its file again to go on from here.\n`);
}
