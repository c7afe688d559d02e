import { Command } from "commander";
import type { CommandIo } from "../cli-io.ts";
import { type DataOptions, withAnswers, withData } from "../data-folder.ts";
import { withExamples } from "../examples.ts";
import { repeatable, wholeValue, wordValue } from "../option-values.ts";
import { saveFile } from "../save-file.ts";
import { writeOut } from "../write-out.ts";

const FORMATS = ["csv", "json"] as const;

interface HistoryOptions extends DataOptions {
  readonly attempt?: number;
  readonly channel?: readonly string[];
  readonly format?: (typeof FORMATS)[number];
  readonly json?: boolean;
  readonly out?: string;
  readonly force?: boolean;
}

/** `midwatch history`: the time-resolved record of a run. */
export function historyCommand(io: CommandIo): Command {
  const command = withData(new Command("history"))
    .description("Hand out the time history of a run: one line a time step, one column a channel.")
    .argument(
      "<run>",
      "id of the run, as tell shows it; its beginning is enough while no other run has the same",
    )
    .option("--attempt <k>", "which attempt; by default the last", wholeValue("--attempt", 1))
    .option("--channel <name>", "only this channel; repeatable", repeatable(String))
    .option(
      "--format <format>",
      `one of ${FORMATS.join(", ")}; by default csv`,
      wordValue("--format", FORMATS),
    )
    .option("--json", "the same as --format json")
    .option("--out <file>", "write to a file instead of standard output")
    .option("--force", "replace the file if it is there")
    .action((run: string, options: HistoryOptions) => history(run, options, io));
  return withExamples(command, [
    ["midwatch history 3f9c2a --out run.csv", "every channel of the run whose id begins so"],
    ["midwatch history 3f9c2a --channel CN --channel CL | head", "two channels, the first steps"],
  ]);
}

async function history(run: string, options: HistoryOptions, io: CommandIo): Promise<void> {
  await withAnswers(options, io, async (answers) => {
    const text = await answers.history(run, {
      attempt: options.attempt ?? null,
      channel: options.channel ?? [],
      format: options.format ?? (options.json === true ? "json" : "csv"),
    });
    if (options.out !== undefined)
      return saveFile(options.out, text, { cwd: io.cwd, force: options.force === true });
    for await (const piece of text) await writeOut(io.stdout, piece);
  });
}
