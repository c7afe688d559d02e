import { Command, CommanderError } from "commander";
import { CAUTION } from "../contract/index.ts";
import type { CliIo, CommandIo } from "./cli-io.ts";
import { commands } from "./commands/index.ts";
import { reportFailure } from "./report-failure.ts";
import { version } from "./version.ts";

/** Runs one command line (without node and program) and returns the exit status; never throws, never exits. */
export async function runCli(args: readonly string[], io: CliIo): Promise<number> {
  let status = 0;
  const commandIo: CommandIo = {
    ...io,
    exitWith: (wanted) => {
      status = wanted;
    },
  };
  try {
    await program(commandIo).parseAsync([...args], { from: "user" });
    return status;
  } catch (error) {
    // Help and version arrive as errors with status 0; they have printed what they had to.
    if (error instanceof CommanderError && error.exitCode === 0) return 0;
    // No command at all: the parser has printed the help on stderr.
    if (error instanceof CommanderError && error.code === "commander.help") return 2;
    return reportFailure(error, io.stderr);
  }
}

function program(io: CommandIo): Command {
  const root = new Command("midwatch")
    .description(
      "Stands the watch over a night of long, unsteady aerodynamic runs, and judges whether each run's average may be used.",
    )
    .version(version(), "-V, --version", "print the version")
    .addHelpText("after", `\n${CAUTION}\n`);
  for (const make of commands) root.addCommand(make(io));
  for (const command of [root, ...root.commands]) tame(command, io);
  return root;
}

/** Lets nothing of the parser write past our streams or end the process. */
function tame(command: Command, io: CommandIo): void {
  command
    .exitOverride()
    .showSuggestionAfterError(true)
    .helpOption("-h, --help", "print this help")
    .configureOutput({
      writeOut: (text) => io.stdout.write(text),
      writeErr: (text) => io.stderr.write(text),
      outputError: () => {},
      getOutHelpWidth: () => io.stdout.columns ?? 100,
      getErrHelpWidth: () => io.stderr.columns ?? 100,
    });
}
