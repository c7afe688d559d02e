import { Command } from "commander";
import { AppError, CAUTION } from "../../contract/index.ts";
import { handedOut } from "../../exports/handed-out.ts";
import type { LoadRow, NightSummary } from "../../night/index.ts";
import type { CommandIo } from "../cli-io.ts";
import { closingWords } from "../closing-words.ts";
import { type DataOptions, dataFolder, withData } from "../data-folder.ts";
import { withExamples } from "../examples.ts";
import { wholeValue } from "../option-values.ts";
import { runTable } from "../run-table.ts";
import { terminalWidth, writeJson, writeOut } from "../write-out.ts";

interface LaunchOptions extends DataOptions {
  readonly workers?: number;
  readonly yes?: boolean;
  readonly json?: boolean;
}

/** `midwatch launch`: runs a campaign in the foreground until it is done, the deadline comes, or it is interrupted. */
export function launchCommand(io: CommandIo): Command {
  const command = withData(new Command("launch"))
    .description(
      "Launch a campaign and keep the watch until every run is done or the deadline comes. Ctrl-C checkpoints and ends; launching the same file again goes on from there.",
    )
    .argument("<file>", "campaign file")
    .option(
      "--workers <n>",
      "runs computed at a time; by default as the campaign says, else one a core",
      wholeValue("--workers", 1),
    )
    .option("--yes", "do not ask, however many runs there are")
    .option("--json", "print what the night came to as one JSON document")
    .action((file: string, options: LaunchOptions) => launch(file, options, io));
  return withExamples(command, [
    ["midwatch launch lantern.yaml", "the whole night, results in ./midwatch-data"],
    ["midwatch launch lantern.yaml --data /scratch/lantern --workers 2", "elsewhere, two runs at a time"],
  ]).addHelpText(
    "after",
    "\nExit status: 0 every run is done or the deadline came, 75 interrupted (launch again to go on), 2 bad input or full disk.",
  );
}

async function launch(file: string, options: LaunchOptions, io: CommandIo): Promise<void> {
  const { planFromFile, workersOf } = await import("../plan-from-file.ts");
  const plan = await planFromFile(file, { yes: options.yes === true }, io);
  const [{ openDataFolder }, { createChildPool }, { folderAnswers }, { watchNight }] = await Promise.all([
    import("../../store/open-data-folder.ts"),
    import("../../../workers/child-pool.ts"),
    import("../../../api/http/index.ts"),
    import("../watch-night.ts"),
  ]);
  const { shown, path } = dataFolder(options, io);
  const folder = await openDataFolder(path, {
    onNotice: (words) => io.stderr.write(`${words}\n`),
    now: () => io.now().getTime(),
  });
  try {
    const size = options.workers ?? workersOf(plan);
    const makeRunner = (onNotice: (words: string) => void) => createChildPool({ size, onNotice });
    const summary = await watchNight({ plan, folder, makeRunner }, io);
    const rows = await folderAnswers(folder, () => null).loads(plan.campaign);
    await closing(summary, rows, { shown, json: options.json === true }, io);
  } finally {
    await folder.close();
  }
}

async function closing(
  summary: NightSummary,
  rows: readonly LoadRow[],
  { shown, json }: { shown: string; json: boolean },
  io: CommandIo,
): Promise<void> {
  const loads = handedOut(rows, false);
  if (json) await writeJson(io.stdout, { summary, loads, caution: CAUTION });
  else {
    const table = runTable(loads, { width: terminalWidth(io.stdout) });
    await writeOut(io.stdout, `\n${table}\n\n${closingWords(summary, shown)}\n`);
  }
  if (summary.endedBy === "stopped") io.exitWith(75);
  if (summary.trouble === null) return;
  const { what, where, fix } = summary.trouble;
  throw new AppError(summary.endedBy === "disk-full" ? "DISK_FULL" : "HISTORY_DAMAGED", what, { where, fix });
}
