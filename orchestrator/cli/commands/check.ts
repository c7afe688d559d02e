import { resolve } from "node:path";
import { Command } from "commander";
import { AppError, CAUTION, type HistoryJudgement } from "../../contract/index.ts";
import { judgementWords } from "../check-words.ts";
import type { CommandIo } from "../cli-io.ts";
import { withExamples } from "../examples.ts";
import { countWords } from "../format-value.ts";
import { type JudgeFileOptions, judgeFile } from "../judge-file.ts";
import {
  confidenceValue,
  periodValue,
  positiveValue,
  repeatable,
  toleranceValue,
  wholeValue,
} from "../option-values.ts";
import { reportFailure } from "../report-failure.ts";
import { terminalWidth, writeJson, writeOut } from "../write-out.ts";

interface CheckOptions extends JudgeFileOptions {
  readonly json?: boolean;
}

/** `midwatch check`: judges histories from anywhere, without campaign, queue or data folder. */
export function checkCommand(io: CommandIo): Command {
  const command = new Command("check")
    .description(
      "Judge histories from anywhere: tables with a header line, time and one column a channel (comma, semicolon, tab, bar or blanks between them; gzip too). Says for every channel whether its average may be used, with half-width and window.",
    )
    .argument("<file...>", "histories to judge, in the order in which they are answered")
    .option("--json", 'print one JSON document, {"files": […]}; nothing if a file can\'t be read')
    .option(
      "--tolerance <value>",
      "half-width allowed: 0.005, or 1% of the mean (the default)",
      toleranceValue,
    )
    .option("--confidence <level>", "confidence of the intervals", confidenceValue, 0.95)
    .option(
      "--period <samples>",
      "a period that the history carries, in samples; repeatable",
      repeatable(periodValue),
    )
    .option(
      "--period-time <t>",
      "the same in the unit of the time column; repeatable",
      repeatable(positiveValue("--period-time", "the unit of time")),
    )
    .option(
      "--planned <steps>",
      "steps the run was planned for; by default the samples there are",
      wholeValue("--planned", 1),
    )
    .option("--time <name>", "column of time; by default the first")
    .option("--channel <name>", "judge only this channel; repeatable", repeatable(String))
    .action((files: string[], options: CheckOptions) => check(files, options, io));
  return withExamples(command, [
    [
      "midwatch check night/run-07.csv --tolerance 1%",
      "which averages may be used, if 1 % of the mean is close enough",
    ],
    [
      "midwatch check runs/*.csv --json --tolerance 0.005 --period 36",
      "a whole folder in one go, for a script",
    ],
  ]).addHelpText(
    "after",
    "\nExit status: 0 every channel of every file is accepted, 1 at least one is not, 2 a file can't be read or an option is wrong.",
  );
}

async function check(files: readonly string[], options: CheckOptions, io: CommandIo): Promise<void> {
  const judged: JudgedFile[] = [];
  let unreadable = 0;
  for (const file of files) {
    try {
      const judgement = await judgeFile(resolve(io.cwd, file), file, options);
      judged.push({ file, ...judgement });
      if (options.json !== true)
        await writeOut(io.stdout, `${judgementWords(file, judgement, terminalWidth(io.stdout))}\n`);
    } catch (error) {
      if (!(error instanceof AppError)) throw error;
      reportFailure(error, io.stderr);
      unreadable += 1;
    }
  }
  await conclude(judged, unreadable, options, io);
}

type JudgedFile = { readonly file: string } & HistoryJudgement;

async function conclude(
  judged: readonly JudgedFile[],
  unreadable: number,
  options: CheckOptions,
  io: CommandIo,
): Promise<void> {
  const channels = judged.flatMap((file) => Object.values(file.channels));
  const accepted = channels.filter((channel) => channel.verdict === "accepted").length;
  if (options.json !== true && judged.length > 0)
    await writeOut(
      io.stdout,
      `${accepted} of ${countWords(channels.length, "channel")} in ${countWords(judged.length, "file")} accepted.\n${CAUTION}\n`,
    );
  if (unreadable > 0) {
    if (options.json === true)
      io.stderr.write("midwatch: nothing is printed, because the answer would not be whole\n");
    io.exitWith(2);
    return;
  }
  if (options.json === true) await writeJson(io.stdout, { files: judged, caution: CAUTION });
  if (accepted < channels.length) io.exitWith(1);
}
