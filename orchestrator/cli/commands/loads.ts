import { Command } from "commander";
import { CAUTION } from "../../contract/index.ts";
import { handedOut } from "../../exports/handed-out.ts";
import { loadsCsv } from "../../exports/loads-csv.ts";
import type { LoadRow } from "../../night/index.ts";
import type { CommandIo } from "../cli-io.ts";
import { type DataOptions, withAnswers, withData } from "../data-folder.ts";
import { withExamples } from "../examples.ts";
import { wordValue } from "../option-values.ts";
import { runTable } from "../run-table.ts";
import { saveFile } from "../save-file.ts";
import { terminalWidth, writeOut } from "../write-out.ts";

const FORMATS = ["table", "csv", "json"] as const;

interface LoadsOptions extends DataOptions {
  readonly all?: boolean;
  readonly format?: (typeof FORMATS)[number];
  readonly json?: boolean;
  readonly out?: string;
  readonly force?: boolean;
}

/** `midwatch loads`: averaged loads, with everything needed to trust them or not. */
export function loadsCommand(io: CommandIo): Command {
  const command = withData(new Command("loads"))
    .description(
      "Hand out averaged loads with half-width and window. Runs that are not accepted are listed with the reason and without a number.",
    )
    .argument("[campaign]", "campaign whose loads are wanted; all campaigns where none is named")
    .option("--all", "give the numbers of what is not accepted too, marked")
    .option(
      "--format <format>",
      `one of ${FORMATS.join(", ")}; by default table`,
      wordValue("--format", FORMATS),
    )
    .option("--json", "the same as --format json")
    .option("--out <file>", "write to a file instead of standard output")
    .option("--force", "replace the file if it is there")
    .action((campaign: string | undefined, options: LoadsOptions) => loads(campaign ?? null, options, io));
  return withExamples(command, [
    ["midwatch loads lantern", "a table to read; a number in it may be used, a dash may not"],
    [
      "midwatch loads lantern --format csv --out lantern.csv",
      'for pandas: read_csv("lantern.csv"); the last column is the caution',
    ],
  ]);
}

async function loads(campaign: string | null, options: LoadsOptions, io: CommandIo): Promise<void> {
  const rows = await withAnswers(options, io, (answers) => answers.loads(campaign));
  const text = asText(handedOut(rows, options.all === true), options, io);
  if (options.out === undefined) await writeOut(io.stdout, text);
  else await saveFile(options.out, [text], { cwd: io.cwd, force: options.force === true });
}

function asText(rows: readonly LoadRow[], options: LoadsOptions, io: CommandIo): string {
  const format = options.format ?? (options.json === true ? "json" : "table");
  if (format === "csv") return loadsCsv(rows);
  if (format === "json") return `${JSON.stringify({ loads: rows, caution: CAUTION }, null, 2)}\n`;
  const table = runTable(rows, { width: options.out === undefined ? terminalWidth(io.stdout) : null });
  const note =
    options.all === true && rows.some((row) => !row.accepted)
      ? "In parentheses: not accepted, not to be used.\n"
      : "";
  return `${rows.length === 0 ? "There are no loads yet." : table}\n${note}${CAUTION}\n`;
}
