import { createInterface } from "node:readline/promises";
import { Command } from "commander";
import { AppError } from "../../contract/index.ts";
import type { CommandIo } from "../cli-io.ts";
import { type DataOptions, withAnswers, withData } from "../data-folder.ts";
import { withExamples } from "../examples.ts";
import { countWords } from "../format-value.ts";
import { writeJson, writeOut } from "../write-out.ts";

interface RemoveOptions extends DataOptions {
  readonly yes?: boolean;
  readonly json?: boolean;
}

/** `midwatch remove`: deletes a campaign with all that only it asked for. */
export function removeCommand(io: CommandIo): Command {
  const command = withData(new Command("remove"))
    .description(
      "Remove a campaign from the data folder, with every run and history that no other campaign asks for. This cannot be undone.",
    )
    .argument("<campaign>", "campaign to remove")
    .option("--yes", "do not ask")
    .option("--json", "print one JSON document")
    .action((campaign: string, options: RemoveOptions) => remove(campaign, options, io));
  return withExamples(command, [["midwatch remove trial --yes", "without being asked, for a script"]]);
}

async function remove(campaign: string, options: RemoveOptions, io: CommandIo): Promise<void> {
  await withAnswers(options, io, async (answers) => {
    const { runs, title } = await answers.campaignState(campaign);
    if (options.yes !== true)
      await confirm(`${campaign} (${title}, ${countWords(runs, "run")})`, campaign, io);
    const removed = await answers.remove(campaign);
    if (options.json === true) return writeJson(io.stdout, { campaign, ...removed });
    const kept =
      removed.runsKept > 0 ? `; ${countWords(removed.runsKept, "run")} kept for other campaigns` : "";
    await writeOut(
      io.stdout,
      `${campaign} is removed, with ${countWords(removed.runsDeleted, "run")} and what was recorded of them${kept}.\n`,
    );
  });
}

async function confirm(what: string, campaign: string, io: CommandIo): Promise<void> {
  const notConfirmed = new AppError("USAGE", "the removal was not confirmed; nothing was removed", {
    where: campaign,
    fix: "Answer with yes, or give --yes.",
  });
  if (io.stdin.isTTY !== true || io.stderr.isTTY !== true) throw notConfirmed;
  const lines = createInterface({ input: io.stdin, output: io.stderr });
  try {
    const answer = await lines.question(`Remove ${what} for good? Type yes to go on: `);
    if (answer.trim().toLowerCase() !== "yes") throw notConfirmed;
  } finally {
    lines.close();
  }
}
